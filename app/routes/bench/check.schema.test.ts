import { expect, test } from "vitest";
import { decimal, observeSchema } from "./check.schema";

test.each([
  ["0.27", 0.27],
  ["0,27", 0.27],
  [" 500 ", 500],
  ["+3", 3],
  ["-3", -3],
  ["0", 0],
])("%j is read as %f", (text, value) => {
  expect(decimal.parse(text)).toBe(value);
});

test.each(["", " ", "1.2.3", "1,000.5", "0x10", "1e3", "NaN", "Infinity", "12 Ω", "> 200"])(
  "%j is no reading",
  (text) => {
    expect(decimal.safeParse(text).success).toBe(false);
  },
);

test("a reading without a word on what the display showed is refused: an over-range must not pass for a value", () => {
  const reading = {
    act: "observe",
    kind: "measured",
    key: "earth-bond:MP1",
    value: "0.1",
    unit: "Ω",
    instrumentId: 1,
  };
  expect(observeSchema.safeParse(reading).success).toBe(false);
  expect(observeSchema.safeParse({ ...reading, bound: "over" }).data).toMatchObject({
    bound: "over",
    value: 0.1,
  });
});
