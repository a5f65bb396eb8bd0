import { expect, test } from "vitest";

import {
  guaranteedBreaking,
  lowBreaking,
  miniatureFuseRatings,
  neededRating,
  prospectiveCurrent,
  proposeRating,
} from "./fuse-data";
import { newElement } from "./elements";

test("ratings from 1 A follow the R10 series of IEC 60127-1 and ISO 3", () => {
  expect(miniatureFuseRatings.filter((each) => each >= 1)).toEqual([
    1, 1.25, 1.6, 2, 2.5, 3.15, 4, 5, 6.3, 8, 10, 12.5, 16,
  ]);
  expect(miniatureFuseRatings[0]).toBe(0.04);
});

test("0.86 A steady asks 1.25 A of a UL fuse (75 %) and 1 A of an IEC fuse", () => {
  expect(0.86 / 0.75).toBeCloseTo(1.147, 3);
  expect(proposeRating(0.86, 10, miniatureFuseRatings, 0.75)).toBe(1.25);
  expect(proposeRating(0.86, 10, miniatureFuseRatings)).toBe(1);
});

test("2.0 A at 60 °C on a slow UL fuse at −0.5 %/K asks 3.232 A, so 4 A", () => {
  const needed = neededRating(2, 0.75, 60, -0.005);
  expect(needed).toBeCloseTo(3.232, 3);
  expect(miniatureFuseRatings.find((each) => each >= needed)).toBe(4);
});

test("no rating is proposed when none lies between load and conductor", () => {
  expect(proposeRating(3.3, 3.9, miniatureFuseRatings)).toBeNull();
  expect(proposeRating(3.3, 4, miniatureFuseRatings)).toBe(4);
});

test.each([
  // IEC 60127-2 sheets 2 and 3: the greater of 35 A and ten times the rating.
  [0.05, 35],
  [3.15, 35],
  [5, 50],
  [6.3, 63],
  [20, 200],
])("low breaking capacity of %d A is %d A", (rating, breaking) => {
  expect(lowBreaking(rating)).toBeCloseTo(breaking, 9);
});

test("the letters on an IEC 60127 fuse say what it breaks; without a letter nothing is assumed", () => {
  const fuse = newElement("fuse", "F1");
  if (fuse.kind !== "fuse") throw new Error("newElement made another kind");
  const iec = { ...fuse, standard: "iec-60127" as const, ratingAmps: 3.15 };
  expect(guaranteedBreaking({ ...iec, breakingLetter: "L" })?.amps).toBe(35);
  expect(guaranteedBreaking({ ...iec, breakingLetter: "E" })?.amps).toBe(150);
  expect(guaranteedBreaking({ ...iec, breakingLetter: "H" })?.amps).toBe(1500);
  expect(guaranteedBreaking({ ...iec, breakingLetter: "unknown" })).toBeNull();
  expect(guaranteedBreaking({ ...iec, breakingLetter: "H", breakingAmps: 500 })?.amps).toBe(500);
  expect(guaranteedBreaking({ ...fuse, standard: "bs-1362" })?.amps).toBe(6000);
});

test("prospective currents worked by hand", () => {
  expect(prospectiveCurrent(230, 0.8)).toBeCloseTo(287.5, 6);
  // Four LFP cells of 8 mΩ, 10 mΩ of wiring, 3 mΩ of contacts at 13.2 V.
  expect(prospectiveCurrent(13.2, 0.032, 0.01, 0.003)).toBeCloseTo(293.33, 2);
  // A 12.8 V lead-acid block of 5 mΩ and 2 mΩ of wiring.
  expect(prospectiveCurrent(12.8, 0.005, 0.002)).toBeCloseTo(1828.57, 2);
  expect(prospectiveCurrent(13.2, null, 0.01)).toBeNull();
  expect(prospectiveCurrent(13.2, 0)).toBeNull();
});
