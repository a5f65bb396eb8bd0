import { expect, test } from "vitest";
import { readTheme, themeCookie } from "./theme";

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
