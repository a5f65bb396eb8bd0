import { expect, test } from "vitest";
import { convertUnit, relatedUnits } from "./scaled-units";

// Factors: SI prefixes, BIPM SI Brochure, 9th edition, table 7.
test.each([
  [980, "kΩ", "MΩ", 0.98],
  [0.3, "Ω", "mΩ", 300],
  [250, "µA", "mA", 0.25],
  [1.25, "kV", "V", 1250],
  [34, "mV", "V", 0.034],
  [2, "GΩ", "MΩ", 2000],
  [450, "nF", "µF", 0.45],
])("%f %s is in %s %f", (value, from, to, expected) => {
  expect(convertUnit(value, from, to)).toBe(expected);
});

test("what doesn't measure the same thing is not converted", () => {
  expect(convertUnit(1, "V", "A")).toBeNull();
  expect(convertUnit(1, "°C", "Ω")).toBeNull();
  expect(convertUnit(1, "toString", "V")).toBeNull();
});

test("every unit can be written down as itself, known or not", () => {
  expect(relatedUnits("MΩ")).toEqual(["mΩ", "Ω", "kΩ", "MΩ", "GΩ"]);
  expect(relatedUnits("°C")).toEqual(["°C"]);
  expect(convertUnit(21, "°C", "°C")).toBe(21);
});
