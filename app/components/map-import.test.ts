import { describe, expect, test } from "vitest";
import { mapOf, part, wire } from "~/engine/map-builder";
import { starterMaps } from "~/engine/starter-maps";
import { importMap } from "./map-import";

describe("importing a map", () => {
  test("what was exported comes back the same", () => {
    for (const { map } of starterMaps) {
      expect(importMap(JSON.stringify(map, null, 2))).toEqual({ ok: true, map });
    }
  });

  test("a syntax error is told by line and column", () => {
    const result = importMap('{\n  "format": "mainsgate-energy-map",\n  "version": 1,,\n}');
    expect(result).toEqual({ ok: false, errors: ["This is no valid JSON: look at line 3, column 16."] });
  });

  test("cut off, empty and foreign texts are refused in words", () => {
    expect(importMap("  ")).toEqual({ ok: false, errors: ["There is nothing to read."] });
    expect(importMap('{"format": ')).toMatchObject({ ok: false });
    expect(importMap("[1, 2]")).toMatchObject({ ok: false });
    expect(
      importMap('{"format": "something-else", "version": 1, "elements": [], "conductors": []}'),
    ).toMatchObject({
      ok: false,
      errors: [expect.stringMatching(/^format: /)],
    });
  });

  test("a wrong value is told by row, by the row's own id and by field", () => {
    const map = mapOf(
      [part("fuse", "F1", ""), part("fuse", "F2", "")],
      [wire("W1", "F1.1", "F2.1", "mains", 1, 1)],
    );
    const wrong = {
      ...map,
      elements: map.elements.map((element) =>
        element.id === "F2" ? { ...element, ratingAmps: -3 } : element,
      ),
    };
    expect(importMap(JSON.stringify(wrong))).toMatchObject({
      ok: false,
      errors: [expect.stringMatching(/^elements, number 2 \(“F2”\), ratingAmps: /)],
    });
  });

  test("a field that the schema doesn't know is refused, not dropped unseen", () => {
    const map = { ...mapOf([part("fuse", "F1", "")], []), note: "hello" };
    expect(importMap(JSON.stringify(map)).ok).toBe(false);
  });

  test("a hundred complaints are told as the first twelve and a count", () => {
    const elements = Array.from({ length: 30 }, (_, index) => ({ id: `F${index}`, label: "", kind: "fuse" }));
    const result = importMap(JSON.stringify({ ...mapOf([], []), elements }));
    expect(result.ok ? [] : result.errors.length).toBe(13);
  });
});
