import { expect, test } from "vitest";

import {
  altitudeFactor,
  clearanceFor,
  creepageFor,
  ratedImpulse,
  reinforcedImpulse,
  requiredDistances,
} from "./insulation-data";

// Values of IEC 60664-1 as seen in public pages, or from memory where the data file says so.

test.each([
  [50, 500],
  [100, 800],
  [150, 1500],
  [230, 2500],
  [300, 2500],
  [600, 4000],
  [1000, 6000],
])("%d V line to neutral in category II is rated %d V impulse", (volts, impulse) => {
  expect(ratedImpulse(volts, 2)).toBe(impulse);
});

test("category moves the impulse by a step; above the table nothing is known", () => {
  expect(
    [1, 2, 3, 4].map((category) =>
      ratedImpulse(230, category === 1 ? 1 : category === 2 ? 2 : category === 3 ? 3 : 4),
    ),
  ).toEqual([1500, 2500, 4000, 6000]);
  expect(ratedImpulse(1200, 2)).toBeNull();
});

test("reinforced insulation takes the next preferred impulse, beyond the last 160 %", () => {
  expect(reinforcedImpulse(2500)).toBe(4000);
  expect(reinforcedImpulse(1500)).toBe(2500);
  expect(reinforcedImpulse(12000)).toBeCloseTo(19200, 6);
});

test("230 V, category II, degree 2: 1.5 mm basic and 3.0 mm reinforced through air, 2.5 and 5.0 mm over group III", () => {
  expect(requiredDistances(230, "basic", { degree: 2 })).toEqual({ clearanceMm: 1.5, creepageMm: 2.5 });
  expect(requiredDistances(230, "reinforced", { degree: 2 })).toEqual({ clearanceMm: 3, creepageMm: 5 });
});

test("the same at 3000 m: 1.71 and 3.42 mm through air", () => {
  expect(requiredDistances(230, "basic", { degree: 2, altitudeM: 3000 })?.clearanceMm).toBeCloseTo(1.71, 9);
  expect(requiredDistances(230, "reinforced", { degree: 2, altitudeM: 3000 })?.clearanceMm).toBeCloseTo(
    3.42,
    9,
  );
});

test("height factors: none to 2000 m, 1.07 at 2500 m, 1.48 at 5000 m, none known above 20 000 m", () => {
  expect(altitudeFactor(0)).toBe(1);
  expect(altitudeFactor(2500)).toBeCloseTo(1.07, 9);
  expect(altitudeFactor(5000)).toBeCloseTo(1.48, 9);
  expect(altitudeFactor(25_000)).toBeNull();
});

test("230 V in degree 3: 4.0 and 8.0 mm over group III", () => {
  expect(requiredDistances(230, "basic", { degree: 3 })?.creepageMm).toBe(4);
  expect(requiredDistances(230, "reinforced", { degree: 3 })?.creepageMm).toBe(8);
});

test("120 V, category II: 0.5 mm in degree 2, 0.8 mm in degree 3, 1.5 mm reinforced", () => {
  expect(requiredDistances(120, "basic", { degree: 2 })?.clearanceMm).toBe(0.5);
  expect(requiredDistances(120, "basic", { degree: 3 })?.clearanceMm).toBe(0.8);
  expect(requiredDistances(120, "reinforced", { degree: 2 })?.clearanceMm).toBe(1.5);
});

test("creepage is never below clearance", () => {
  expect(requiredDistances(12, "reinforced", { degree: 2, altitudeM: 20_000 })?.creepageMm).toBeCloseTo(
    0.2 * 14.5,
    6,
  );
});

test.each([
  // Volts rms, degree 2 group I, II, III, degree 3 group III: IEC 60664-1 Table F.4, a public page.
  [10, 0.4, 0.4, 0.4, 1.0],
  [50, 0.6, 0.85, 1.2, 1.9],
  [63, 0.63, 0.9, 1.25, 2.0],
  [125, 0.75, 1.05, 1.5, 2.4],
  [160, 0.8, 1.1, 1.6, 2.5],
  [200, 1.0, 1.4, 2.0, 3.2],
  [250, 1.25, 1.8, 2.5, 4.0],
  [320, 1.6, 2.2, 3.2, 5.0],
  [400, 2.0, 2.8, 4.0, 6.3],
  [500, 2.5, 3.6, 5.0, 8.0],
  [1000, 5.0, 7.1, 10.0, 16.0],
])("creepage at %d V", (volts, first, second, third, dirty) => {
  expect(creepageFor(volts, 2, "I")).toBe(first);
  expect(creepageFor(volts, 2, "II")).toBe(second);
  expect(creepageFor(volts, 2, "III")).toBe(third);
  expect(creepageFor(volts, 3, "III")).toBe(dirty);
});

test("between rows the next higher one holds; above the table nothing is known", () => {
  expect(creepageFor(230, 2, "III")).toBe(2.5);
  expect(creepageFor(1001, 2, "III")).toBeNull();
});

test("clearances between rows lie on the straight line", () => {
  expect(clearanceFor(2000, 2)).toBe(1);
  expect(clearanceFor(2250, 2)).toBeCloseTo(1.25, 9);
  expect(clearanceFor(100, 2)).toBe(0.2);
  expect(clearanceFor(13_000, 2)).toBeNull();
});
