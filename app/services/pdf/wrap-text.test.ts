import fc from "fast-check";
import { expect, test } from "vitest";
import { wrapText } from "./wrap-text";

/** Every character one point wide. */
const measure = (text: string) => [...text].length;

test("words stay whole while they fit, and line breaks are kept", () => {
  expect(wrapText("one two three\nfour", 7, measure)).toEqual(["one two", "three", "four"]);
});

test("a word wider than the line is broken instead of running out of the cell", () => {
  expect(wrapText("see 0123456789abcdef now", 6, measure)).toEqual([
    "see",
    "012345",
    "6789ab",
    "cdef",
    "now",
  ]);
});

test("an empty text is one empty line, and an empty line stays", () => {
  expect(wrapText("", 10, measure)).toEqual([""]);
  expect(wrapText("a\n\nb", 10, measure)).toEqual(["a", "", "b"]);
});

test("nothing is lost and no line is too wide, whatever the text", () => {
  fc.assert(
    fc.property(fc.string({ unit: "grapheme" }), fc.integer({ min: 1, max: 40 }), (text, width) => {
      const lines = wrapText(text, width, measure);
      for (const line of lines) expect(measure(line)).toBeLessThanOrEqual(width);
      const letters = (value: string) => value.replace(/\s/g, "");
      expect(letters(lines.join(""))).toBe(letters(text));
    }),
  );
});
