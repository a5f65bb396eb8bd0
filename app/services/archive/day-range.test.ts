import { expect, test } from "vitest";
import { addDays, nextDay, startOfDay } from "./day-range";

test("a day begins at the workshop's midnight, in winter, in summer and on the days when the clock changes", () => {
  const start = (zone: string, day: string) => startOfDay(zone, day).toISOString();
  expect(start("UTC", "2026-05-04")).toBe("2026-05-04T00:00:00.000Z");
  expect(start("Europe/Berlin", "2026-01-10")).toBe("2026-01-09T23:00:00.000Z");
  expect(start("Europe/Berlin", "2026-07-10")).toBe("2026-07-09T22:00:00.000Z");
  // The EU's clock changes on 29 March and 25 October 2026 at 01:00 UTC.
  expect(start("Europe/Berlin", "2026-03-29")).toBe("2026-03-28T23:00:00.000Z");
  expect(start("Europe/Berlin", "2026-03-30")).toBe("2026-03-29T22:00:00.000Z");
  expect(start("Europe/Berlin", "2026-10-26")).toBe("2026-10-25T23:00:00.000Z");
  expect(start("America/New_York", "2026-07-10")).toBe("2026-07-10T04:00:00.000Z");
  expect(start("Asia/Kathmandu", "2026-07-10")).toBe("2026-07-09T18:15:00.000Z");
});

test("days follow one another over month and year", () => {
  expect(nextDay("2026-12-31")).toBe("2027-01-01");
  expect(nextDay("2028-02-28")).toBe("2028-02-29");
  expect(addDays("2026-01-15", 30)).toBe("2026-02-14");
});
