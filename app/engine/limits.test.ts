import { expect, test } from "vitest";

import { circuitOf } from "./circuit";
import { earthLimit, steppedEarthLimit } from "./earth-limit";
import { capacitorMilliamps, leakageSum } from "./leakage";
import { mapOf, part } from "./map-builder";
import { viewOf } from "./map-view";
import { findRuleSet, listRuleValues, ruleSets } from "./rule-set";
import { largestBleeder, pinCharges, residualVolts } from "./stored-charge";
import { starterMaps } from "./starter-maps";
import { withData, without } from "./map-builder";

const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "I" } as const;
const europe = ruleSets[0];
const uk = ruleSets[1];
if (europe === undefined || uk === undefined) throw new Error("two rule sets are needed");

test.each([
  // EN 50678/50699: 0.3 Ω to 5 m, 0.1 Ω for each started 7.5 m, at most 1.0 Ω.
  [5, 0.3],
  [5.1, 0.4],
  [12, 0.4],
  [12.5, 0.4],
  [13, 0.5],
  [20, 0.5],
  [100, 1.0],
])("a cord of %d m allows %d Ω", (length, ohms) => {
  expect(earthLimit(europe, { ...facts, cordLengthM: length }).ohms).toBeCloseTo(ohms, 9);
});

test("an unknown cord gets the tightest value of the profile", () => {
  expect(earthLimit(europe, facts).ohms).toBe(0.3);
  expect(earthLimit(uk, facts).ohms).toBe(0.1);
  expect(earthLimit(uk, { ...facts, cordLengthM: 2 }).ohms).toBe(0.1);
});

test("UK code of practice, 2 m of 0.75 mm²: 0.1 Ω and 52 mΩ", () => {
  expect(earthLimit(uk, { ...facts, cordLengthM: 2, cordAreaMm2: 0.75 }).ohms).toBeCloseTo(0.152, 9);
});

test("a European cord above 1.5 mm² allows its computed resistance, never less than 0.1 Ω", () => {
  // IEC 60228 class 5: 2.5 mm² has 7.98 Ω/km, so 3 m have 24 mΩ and 20 m 160 mΩ.
  const limit = (cordLengthM: number, cordAreaMm2: number) =>
    earthLimit(europe, { ...facts, cordLengthM, cordAreaMm2 });
  expect(limit(3, 2.5).ohms).toBe(0.1);
  expect(limit(20, 2.5).ohms).toBeCloseTo(0.1596, 6);
  expect(limit(3, 1.5).ohms).toBeCloseTo(0.3, 9);
  expect(limit(20, 2.5).basis).toContain("above 1.5 mm²");
  expect(earthLimit(europe, { ...facts, cordLengthM: 3 }).basis).toContain("taken as at most 1.5 mm²");
});

test("the steps hold for any length", () => {
  const rule = { base: 0.3, baseLength: 5, step: 0.1, stepLength: 7.5, cap: 1 };
  let last = 0;
  for (let length = 0.5; length < 80; length += 0.5) {
    const ohms = steppedEarthLimit(length, rule);
    expect(ohms).toBeGreaterThanOrEqual(last);
    last = ohms;
  }
  expect(last).toBe(1);
});

test("4.7 nF at 230 V 50 Hz carry 0.3396 mA, 2.2 nF 0.1590 mA", () => {
  expect(capacitorMilliamps(4.7, 230, 50)).toBeCloseTo(0.3396, 4);
  expect(capacitorMilliamps(2.2, 230, 50)).toBeCloseTo(0.159, 4);
});

test("six capacitors of 4.7 nF stay below 3.5 mA, eleven do not", () => {
  const sum = (count: number) =>
    leakageSum(
      circuitOf(
        viewOf(
          mapOf(
            Array.from({ length: count }, (_, index) =>
              part("y-capacitor", `CY${index}`, "", { nanofarads: 4.7 }),
            ),
            [],
          ),
        ),
      ),
      facts,
    );
  expect(sum(6).milliamps).toBeCloseTo(2.04, 2);
  expect(sum(11).milliamps).toBeCloseTo(3.74, 2);
  expect(sum(6).complete).toBe(true);
});

test("a capacitor without a value leaves the sum incomplete", () => {
  const map = mapOf(
    [part("y-capacitor", "CY1", "", { nanofarads: 4.7 }), part("y-capacitor", "CY2", "")],
    [],
  );
  expect(leakageSum(circuitOf(viewOf(map)), facts).complete).toBe(false);
});

test("0.47 µF over 1 MΩ from 230 V: 38.74 V after 1 s, 4.62 V after 2 s", () => {
  expect(residualVolts(230, 470, 1000, 1)).toBeCloseTo(38.74, 2);
  expect(residualVolts(230, 470, 1000, 2)).toBeCloseTo(4.615, 2);
});

test("largest bleeder for 0.47 µF at 240 V to 34 V in 1 s is 924.7 kΩ", () => {
  expect(largestBleeder(240, 470, 34, 1)).toBeCloseTo(924.7, 0);
});

test("a bleeder behind the switch does not help with the switch off", () => {
  const amplifier = starterMaps.find(({ key }) => key === "audio-amplifier")?.map;
  if (amplifier === undefined) throw new Error("the starter is gone");
  const inlet = amplifier.elements.find((each) => each.kind === "mains-inlet");
  if (inlet?.kind !== "mains-inlet") throw new Error("the starter has no inlet");
  const volts = (map: typeof amplifier) =>
    Object.fromEntries(
      pinCharges(circuitOf(viewOf(map)), inlet, 230, 1).map((each) => [each.setting, each.volts]),
    );
  expect(volts(amplifier).off).toBeLessThan(1);
  const moved = {
    ...without(amplifier, "W8", "W9"),
    conductors: [
      ...without(amplifier, "W8", "W9").conductors,
      ...amplifier.conductors
        .filter(({ id }) => id === "W8" || id === "W9")
        .map((each) => ({ ...each, from: { element: "S1", terminal: each.id === "W8" ? "1b" : "2b" } })),
    ],
  };
  expect(volts(moved).off).toBeCloseTo(325.27, 1);
  expect(volts(moved).on).toBeLessThan(1);
  expect(volts(withData(amplifier, "CX1", { nanofarads: null })).off).toBeNull();
  expect(volts(withData(amplifier, "R1", { kilohms: null })).off).toBeNull();
});

test("rule sets are found by key and version only, and every value has its source", () => {
  expect(findRuleSet("eu-after-repair", "1")?.region).toBe("Europe");
  expect(findRuleSet("eu-after-repair", "0")).toBeUndefined();
  for (const ruleSet of ruleSets) {
    const values = listRuleValues(ruleSet);
    expect(values.length).toBeGreaterThan(15);
    for (const { value } of values) {
      expect(Number.isFinite(value.value)).toBe(true);
      expect(value.citation.standard).not.toBe("");
      expect(value.citation.clause).not.toBe("");
      expect(value.unit).not.toBe("");
    }
  }
});
