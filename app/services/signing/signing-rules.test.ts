import { expect, test } from "vitest";
import { addMonths, lastRecheckDay, nameMatches } from "./signing-rules";

test("months are added in the calendar, and the day is held back where the month is shorter", () => {
  expect(addMonths("2026-05-04", 12)).toBe("2027-05-04");
  expect(addMonths("2026-01-31", 1)).toBe("2026-02-28");
  expect(addMonths("2024-02-29", 12)).toBe("2025-02-28");
  expect(addMonths("2026-11-15", 3)).toBe("2027-02-15");
});

test("the last possible recheck is five years on", () => {
  expect(lastRecheckDay("2026-12-01")).toBe("2031-12-01");
});

test("a typed name must be the person's, but not to the last blank", () => {
  expect(nameMatches("  ada  lindqvist ", "Ada Lindqvist")).toBe(true);
  expect(nameMatches("Re\u0301mi", "R\u00e9mi")).toBe(true);
  expect(nameMatches("A. Lindqvist", "Ada Lindqvist")).toBe(false);
  expect(nameMatches("", "Ada")).toBe(false);
});
