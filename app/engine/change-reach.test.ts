import { expect, test } from "vitest";

import { affectedChecks } from "./compare-maps";
import { demoMaps } from "./demo-maps";
import type { EnergyMap } from "./energy-map";
import { extended, part, withData, wire } from "./map-builder";
import { ruleSets } from "./rule-set";
import { starterMaps } from "./starter-maps";

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
} as const;
const affected = (before: EnergyMap, after: EnergyMap, protectionClass: "I" | "II" = "I") =>
  affectedChecks(before, after, rules, { ...facts, protectionClass })
    .filter((each) => each.affected)
    .map(({ key }) => key);
const starter = (key: string) => {
  const map = starterMaps.find((each) => each.key === key)?.map;
  if (map === undefined) throw new Error(`there is no starter ${key}`);
  return map;
};
const lamp = starter("mains-led-lamp");
const supply = starter("linear-bench-supply");

test("a capacitor from mains to the output of a class II lamp touches its touch current", () => {
  const after = extended(
    lamp,
    [part("y-capacitor", "CY9", "", { nanofarads: 1, safetyClass: "Y1" })],
    [wire("Q1", "S1.1b", "CY9.1", "mains", 0.75, 0.1), wire("Q2", "CY9.2", "PS1.-", "mains", 0.75, 0.1)],
  );
  expect(affected(lamp, after, "II")).toContain("touch-current:X1");
});

test("another supply touches insulation, distances, stored charge, touch current and what must be apart", () => {
  const keys = affected(lamp, withData(lamp, "PS1", { outputVolts: 24.5 }), "II");
  for (const key of [
    "insulation-barrier:MP1",
    "insulation-clearance:MP1",
    "residual-voltage:X1",
    "touch-current:X1",
    "circuits-apart",
  ])
    expect(keys).toContain(key);
});

test("a wire made bare and long touches distances, earth current and what must be apart", () => {
  const after: EnergyMap = {
    ...supply,
    conductors: supply.conductors.map((each) =>
      each.id === "W4" ? { ...each, insulation: "none" as const, lengthM: 1 } : each,
    ),
  };
  const keys = affected(supply, after);
  for (const key of [
    "insulation-clearance:MP1",
    "insulation-creepage:MP1",
    "earth-current:X1",
    "circuits-apart",
  ])
    expect(keys).toContain(key);
});

test("a blocking diode that leaks more touches the way backwards", () => {
  const charger = starter("battery-charger");
  const keys = affected(charger, withData(charger, "D1", { leakageMicroamps: 1000 }), "II");
  expect(keys).toContain("backfeed:BT1:X1");
});

test("another transformer touches stored charge, earth current and what must be apart", () => {
  const keys = affected(supply, withData(supply, "T1", { voltAmperes: 63 }));
  for (const key of ["residual-voltage:X1", "earth-current:X1", "circuits-apart"])
    expect(keys).toContain(key);
});

test("a name alone may be another part: wiring is looked at, heat and touch current are measured again", () => {
  const keys = affected(lamp, withData(lamp, "PS1", { label: "Other driver" }), "II");
  for (const key of ["visual-wiring", "heat-surface", "touch-current:X1"]) expect(keys).toContain(key);
});

test("what hangs together with nothing touches only itself and the wiring", () => {
  const loose = extended(demoMaps.sound, [part("bleeder", "R9", "")], []);
  const keys = affected(loose, withData(loose, "R9", { kilohms: 10 }));
  expect(keys).toContain("visual-wiring");
  expect(keys).not.toContain("earth-current:X1");
  expect(keys).not.toContain("insulation-barrier:CH1");
});
