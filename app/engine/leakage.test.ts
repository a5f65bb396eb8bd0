import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import type { EnergyMap } from "./energy-map";
import { mapOf, part, withData, wire } from "./map-builder";
import { ruleSets } from "./rule-set";
import { starterMaps } from "./starter-maps";

const [europe, uk] = ruleSets;
if (europe === undefined || uk === undefined) throw new Error("two rule sets are needed");
const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
  handheld: false,
} as const;
const amplifier = (() => {
  const map = starterMaps.find(({ key }) => key === "audio-amplifier")?.map;
  if (map === undefined) throw new Error("the starter is gone");
  return map;
})();
const capacitors = (nanofarads: number) =>
  withData(withData(amplifier, "CY1", { nanofarads }), "CY2", { nanofarads });
const check = (map: EnergyMap, key: string, ruleSet = europe, by: Parameters<typeof analyse>[2] = facts) =>
  deriveBenchSheet(map, ruleSet, by).find((each) => each.key === key);
const statement = (map: EnergyMap, ruleSet = europe, by: Parameters<typeof analyse>[2] = facts) =>
  analyse(map, ruleSet, by).statements.find(({ id }) => id === "leakage sum");

test("class II: what capacitors leak is a computed touch current, and 7.2 mA fails it", () => {
  // 2 · 2π · 50 Hz · 50 nF · 230 V = 7.2 mA against 0.5 mA (EN 50678 touch current).
  const two = { ...facts, protectionClass: "II" } as const;
  const touch = check(capacitors(50), "touch-current:X1", europe, two);
  expect(touch?.computed?.verdict).toBe("fail");
  expect(touch?.computed?.reasons[0]?.text).toContain("7.226 mA");
  expect(touch?.subjects.elements).toEqual(expect.arrayContaining(["CY1", "CY2"]));
  expect(check(capacitors(1), "touch-current:X1", europe, two)?.computed?.verdict).toBe("pass");
  expect(
    check(withData(amplifier, "CY1", { nanofarads: null }), "touch-current:X1", europe, two)?.computed
      ?.verdict,
  ).toBe("unknown");
});

test("held in the hand by the UK code: statement and check use the same 0.75 mA", () => {
  // 2 · 0.7226 mA = 1.445 mA: below 3.5 mA, above the 0.75 mA of hand-held class I.
  const held = { ...facts, handheld: true };
  expect(check(capacitors(10), "earth-current:X1", uk, held)?.computed?.verdict).toBe("fail");
  expect(statement(capacitors(10), uk, held)?.level).toBe("defect");
  expect(statement(capacitors(10), uk, { ...facts, handheld: false })?.level).toBe("good");
});

const heater = (amps: number | null) =>
  mapOf(
    [
      part("mains-inlet", "X1", "", { earthPin: "yes" }),
      part("load", "LD1", "", { supply: "mains", amps, heating: "yes" }),
    ],
    [wire("W1", "X1.L", "LD1.L", "mains", 2.5, 1), wire("W2", "X1.N", "LD1.N", "mains", 2.5, 1)],
  );
const limitOf = (map: EnergyMap, ruleSet = europe) => {
  const asks = check(map, "earth-current:X1", ruleSet)?.asks;
  return asks?.kind === "reading" && "value" in asks.limit ? asks.limit.value : null;
};

test.each([
  // EN 50678: 3.5 mA, heating above 3.5 kW 1 mA/kW up to 10 mA. UK code: heating 0.75 mA/kW, 0.75 to 5 mA.
  [10, 3.5, 1.725],
  [20, 4.6, 3.45],
  [60, 10, 5],
  [0.5, 3.5, 0.75],
  [null, 3.5, 0.75],
])(
  "a heater of %s A at 230 V may leak %s mA in Europe and %s mA by the UK code",
  (amps, european, british) => {
    expect(limitOf(heater(amps))).toBeCloseTo(european, 6);
    expect(limitOf(heater(amps), uk)).toBeCloseTo(british, 6);
  },
);
