import { expect, test } from "vitest";
import { readTheme, safeReturn, themeCookie } from "./theme";

test.each([
  ["theme=dark", "dark"],
  ["mainsgate=abc; theme=light", "light"],
  ["mytheme=dark", "system"],
  ["theme=purple", "system"],
  ["", "system"],
  [null, "system"],
])("the cookie header %s means %s", (header, theme) => {
  expect(readTheme(header)).toBe(theme);
});

test("what is set is read again", () => {
  expect(readTheme(themeCookie("dark").split(";")[0] ?? null)).toBe("dark");
});

test.each([
  ["/w/demo/units?q=1", "/w/demo/units?q=1"],
  ["https://elsewhere.example/", "/"],
  ["//elsewhere.example", "/"],
  ["/\\elsewhere.example", "/"],
  [null, "/"],
])("the way back %s leads to %s, never to another site", (given, to) => {
  expect(safeReturn(given)).toBe(to);
});
