import { expect, test } from "vitest";

import { affectedChecks, compareMaps } from "./compare-maps";
import { demoMaps } from "./demo-maps";
import { extended, part, withData, without, wire } from "./map-builder";
import { ruleSets } from "./rule-set";

const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
} as const;
const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const affected = (before: typeof demoMaps.sound, after: typeof demoMaps.sound) =>
  affectedChecks(before, after, rules, facts)
    .filter((each) => each.affected)
    .map(({ key }) => key);

test("a map differs from itself in nothing, whatever the order of its rows, and touches no check", () => {
  const shuffled = {
    ...demoMaps.sound,
    elements: [...demoMaps.sound.elements].reverse(),
    conductors: [...demoMaps.sound.conductors].reverse(),
  };
  expect(compareMaps(demoMaps.sound, shuffled)).toEqual([]);
  expect(affected(demoMaps.sound, demoMaps.sound)).toEqual([]);
});

test("added, removed and changed, field by field", () => {
  const before = demoMaps.sound;
  const after = extended(
    without(withData(before, "F1", { ratingAmps: 2 }), "H1"),
    [part("fan", "M1", "Fan", { amps: 0.1 })],
    [wire("W20", "XO1.+", "M1.+", "elv", 0.5, 0.1)],
  );
  expect(
    compareMaps(before, after).map(({ subject, id, change, fields }) => [subject, id, change, fields]),
  ).toEqual([
    ["element", "F1", "changed", [{ field: "ratingAmps", before: 1.6, after: 2 }]],
    ["element", "H1", "removed", []],
    ["element", "M1", "added", []],
    ["conductor", "W15", "removed", []],
    ["conductor", "W16", "removed", []],
    ["conductor", "W20", "added", []],
  ]);
});

test("a new mains fuse touches what it protects and not the battery's own checks", () => {
  const keys = affected(demoMaps.sound, withData(demoMaps.sound, "F1", { ratingAmps: 2 }));
  expect(keys).toContain("fuse:F1");
  expect(keys).toContain("conductors:X1");
  expect(keys).not.toContain("fuse:F2");
  expect(keys).not.toContain("conductors:BT1");
  expect(keys).not.toContain("battery-state:BT1");
  expect(keys).not.toContain("charge-voltage:BT1:CH1");
});

test("a moved lamp touches its truth", () => {
  expect(affected(demoMaps.indicatorBackfed, demoMaps.sound)).toContain("lamp-truth:H1");
});

test("a name alone changes no answer, but the sheet that shows it", () => {
  const keys = affected(demoMaps.sound, withData(demoMaps.sound, "F1", { label: "Fuse at the inlet" }));
  expect(keys).not.toContain("fuse:F2");
  expect(keys).not.toContain("operation");
});

test("a check that was not there before is affected", () => {
  const changes = affectedChecks(without(demoMaps.sound, "H1"), demoMaps.sound, rules, facts);
  expect(changes.find(({ key }) => key === "lamp-truth:H1")).toEqual({
    key: "lamp-truth:H1",
    affected: true,
    because: expect.arrayContaining(["This check is new."]),
  });
});

test("a part that changed touches its checks even where no answer and no limit differs", () => {
  const keys = affected(demoMaps.sound, withData(demoMaps.sound, "DI1", { ratedAmps: 20 }));
  expect(keys).toContain("lamp-truth:H1");
  expect(keys).toContain("conductors:CH1");
  expect(keys).not.toContain("fuse:F1");
  const because = affectedChecks(
    demoMaps.sound,
    withData(demoMaps.sound, "DI1", { ratedAmps: 20 }),
    rules,
    facts,
  ).find(({ key }) => key === "lamp-truth:H1")?.because;
  expect(because).toEqual(["It concerns what was changed or what is joined to it: DI1."]);
});
