import { expect, test } from "vitest";
import { calibrationState, inCalibration } from "./calibration";

const instrument = { calibratedOn: "2026-01-15", calibrationDue: "2027-01-15", retired: false };

test.each([
  ["2026-01-14", "not-yet", false],
  ["2026-01-15", "in-calibration", true],
  ["2026-12-15", "in-calibration", true],
  ["2026-12-16", "due-soon", true],
  ["2027-01-15", "due-soon", true],
  ["2027-01-16", "overdue", false],
] as const)("on %s it is %s", (day, state, usable) => {
  expect(calibrationState(instrument, day)).toBe(state);
  expect(inCalibration(instrument, day)).toBe(usable);
});

test("a retired instrument is never in calibration", () => {
  expect(inCalibration({ ...instrument, retired: true }, "2026-06-01")).toBe(false);
});
