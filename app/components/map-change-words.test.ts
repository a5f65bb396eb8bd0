import { expect, test } from "vitest";
import { compareMaps } from "~/engine/compare-maps";
import { mapOf, part, wire } from "~/engine/map-builder";
import { changedFieldLabel, changedValueText } from "./map-change-words";

test("a change of a map is told in the words of the editor", () => {
  const before = mapOf(
    [part("fuse", "F1", "Fuse", { standard: "blade", ratingAmps: 5 }), part("fuse", "F2", "Other")],
    [wire("W1", "F1.1", "F2.1", "elv", 1.5, 0.2)],
  );
  const after = mapOf(
    [part("fuse", "F1", "Main fuse", { standard: "class-t", ratingAmps: 3 }), part("fuse", "F2", "Other")],
    [wire("W1", "F1.1", "F2.2", "elv", null, 0.3)],
  );
  const told = compareMaps(before, after).flatMap(({ id, fields }) =>
    fields.map(
      ({ field, before: was, after: is }) =>
        `${id} ${changedFieldLabel(field)}: ${changedValueText(field, was)} → ${changedValueText(field, is)}`,
    ),
  );
  expect(told.sort()).toEqual(
    [
      "F1 Name: Fuse → Main fuse",
      "F1 Rated current: 5 A → 3 A",
      "F1 Type: Blade, ISO 8820-3 → Class T",
      "W1 Cross-section: 1.5 mm² → not known",
      "W1 Length: 0.2 m → 0.3 m",
      "W1 To: F2 · 1 → F2 · 2",
    ].sort(),
  );
});
