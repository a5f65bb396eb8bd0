import { expect, test } from "vitest";
import { createChangeLimit } from "./change-limit";

test("the change after the last allowed one waits for the window's end, each address by itself", () => {
  const count = createChangeLimit(3);
  const start = 1_000_000;
  expect([0, 1, 2].map((second) => count("a", start + second * 1000))).toEqual([null, null, null]);
  expect(count("a", start + 20_000)).toBe(40);
  expect(count("b", start + 20_000)).toBeNull();
  expect(count("a", start + 59_999)).toBe(1);
  expect(count("a", start + 60_000)).toBeNull();
});
