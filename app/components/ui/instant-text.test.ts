import { expect, test } from "vitest";
import { dayText } from "~/workflow/day-text";
import { instantText } from "./instant-text";

// Offsets by hand: Berlin is UTC+1 in winter and UTC+2 in summer (changes on the last Sundays of March and October at
// 01:00 UTC); Kathmandu is UTC+5:45; Auckland is UTC+13 in December.
test.each([
  ["2026-12-01T13:05:09Z", "Europe/Berlin", "1 Dec 2026, 14:05"],
  ["2026-07-01T13:05:09Z", "Europe/Berlin", "1 Jul 2026, 15:05"],
  ["2027-03-28T00:59:59Z", "Europe/Berlin", "28 Mar 2027, 01:59"],
  ["2027-03-28T01:00:00Z", "Europe/Berlin", "28 Mar 2027, 03:00"],
  ["2026-12-31T23:30:00Z", "Europe/Berlin", "1 Jan 2027, 00:30"],
  ["2026-12-31T18:20:00Z", "Asia/Kathmandu", "1 Jan 2027, 00:05"],
  ["2026-12-01T11:00:00Z", "Pacific/Auckland", "2 Dec 2026, 00:00"],
  ["2026-12-01T00:00:00Z", "UTC", "1 Dec 2026, 00:00"],
])("%s in %s is %s", (instant, zone, text) => {
  expect(instantText(new Date(instant), zone)).toBe(text);
});

test("a date and a time with seconds", () => {
  const instant = new Date("2026-12-31T23:30:07.900Z");
  expect(instantText(instant, "Europe/Berlin", "date")).toBe("1 Jan 2027");
  expect(instantText(instant, "Europe/Berlin", "date-time-seconds")).toBe("1 Jan 2027, 00:30:07");
});

test("a time zone that does not exist is an error, not UTC in silence", () => {
  expect(() => instantText(new Date(0), "Europe/Nowhere")).toThrow(RangeError);
});

test("a calendar day stays the day it is; other text is left alone", () => {
  expect(dayText("2027-03-07")).toBe("7 Mar 2027");
  expect(dayText("2027-13-07")).toBe("2027-13-07");
  expect(dayText("soon")).toBe("soon");
});
