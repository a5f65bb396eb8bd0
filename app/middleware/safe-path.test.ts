import { expect, test } from "vitest";
import { safePath } from "./safe-path";

test.each(["/", "/w/demo", "/w/demo/units?state=draft&page=2", "/w/demo/bench/7#check"])(
  "keeps %s",
  (path) => {
    expect(safePath(path)).toBe(path);
  },
);

test.each([
  "https://elsewhere.example/",
  "//elsewhere.example/",
  "/\\elsewhere.example/",
  "\\\\elsewhere.example",
  "/\t/elsewhere.example/",
  "/.//elsewhere.example/",
  "/w/..//elsewhere.example/",
  "javascript:alert(1)",
  "elsewhere",
  "",
  null,
  undefined,
  7,
])("leads to the fallback instead of %j", (path) => {
  expect(safePath(path, "/home")).toBe("/home");
});

test("what it gives can be given to a browser again and stays on the site", () => {
  for (const path of ["/a/../b", "/a/./b?to=//x", "/%2F%2Felsewhere.example"]) {
    expect(new URL(safePath(path), "https://mainsgate.example").host).toBe("mainsgate.example");
  }
});
