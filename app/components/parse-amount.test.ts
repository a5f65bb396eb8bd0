import { expect, test } from "vitest";
import { parseAmount } from "./parse-amount";

test.each([
  ["3.15", 3.15],
  ["3,15", 3.15],
  [" 1 500 ", 1500],
  ["0", 0],
  [".5", 0.5],
  ["−4", -4],
  ["5e-3", 0.005],
])("reads %j as %d", (text, amount) => {
  expect(parseAmount(text)).toBe(amount);
});

test.each(["", "abc", "1,000.5", "1.000,5", "3 A", "--1", "Infinity", "0x10", "1e999"])(
  "refuses %j",
  (text) => {
    expect(parseAmount(text)).toBeNull();
  },
);
