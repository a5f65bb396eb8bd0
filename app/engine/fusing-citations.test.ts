import { expect, test } from "vitest";

import { deriveBenchSheet } from "./bench-sheet";
import { demoMaps } from "./demo-maps";
import type { EnergyMap } from "./energy-map";
import { ruleSets } from "./rule-set";
import { starterMaps } from "./starter-maps";

// Every figure that decides a verdict stands with its source.

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
} as const;
const check = (map: EnergyMap, key: string, altitudeM: number | null = null) => {
  const found = deriveBenchSheet(map, rules, { ...facts, altitudeM }).find((each) => each.key === key);
  if (found === undefined) throw new Error(`there is no check ${key}`);
  return found;
};
const clauses = (map: EnergyMap, key: string, altitudeM: number | null = null) =>
  check(map, key, altitudeM).citations.map(({ standard, clause }) => `${standard} ${clause}`);
const supply = starterMaps.find(({ key }) => key === "linear-bench-supply")?.map;
if (supply === undefined) throw new Error("the starter is gone");
const thick: EnergyMap = {
  ...demoMaps.sound,
  conductors: demoMaps.sound.conductors.map((each) =>
    each.id === "W12" ? { ...each, area: { mm2: 6 } } : each,
  ),
};

test("a thick battery wire is cited by the table that it was taken from, thin ones by practice", () => {
  expect(clauses(thick, "conductors:BT1")).toEqual(
    expect.arrayContaining([
      expect.stringContaining("IEC 60335-1 Table 11"),
      expect.stringContaining("half the free-air current"),
      expect.stringContaining("180 mm"),
    ]),
  );
  expect(clauses(thick, "conductors:BT1").join("\n")).not.toContain("4F3A");
  expect(clauses(demoMaps.sound, "conductors:BT1").join("\n")).not.toContain("Table 11");
});

test("mains wires are cited by the cord table and by the practice for socket breakers", () => {
  expect(clauses(demoMaps.sound, "conductors:X1")).toEqual([
    "BS 7671 Table 4F3A",
    expect.stringContaining("up to 16 A"),
  ]);
});

test("the transformer's 5 % and the factor for height are cited where they decide", () => {
  expect(clauses(supply, "fuse:F2").join("\n")).toContain("5 %");
  expect(clauses(supply, "fuse:F1").join("\n")).not.toContain("5 %");
  expect(clauses(supply, "insulation-clearance:MP1", 3000).join("\n")).toContain("Table A.2");
  expect(clauses(supply, "insulation-clearance:MP1", 500).join("\n")).not.toContain("Table A.2");
});

test("that ratings are for 30 °C is said where the map states no air temperature, and only there", () => {
  expect(check(supply, "conductors:X1").method.join("\n")).toMatch(/W1, .* are for air of up to 30 °C/);
  const stated: EnergyMap = {
    ...supply,
    conductors: supply.conductors.map((each) => ({ ...each, ambientC: 30 })),
  };
  expect(check(stated, "conductors:X1").method.join("\n")).not.toContain("30 °C");
});
