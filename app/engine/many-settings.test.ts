import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import { circuitOf } from "./circuit";
import { settingsOf } from "./energise";
import type { Element, EnergyMap } from "./energy-map";
import { extended, mapOf, part, wire } from "./map-builder";
import { viewOf } from "./map-view";
import { ruleSets } from "./rule-set";

// More positions than can be worked out: what was not looked at is not known, and what is wrong is still found.

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "II" as const };
const elv = (id: string, from: string, to: string, mm2 = 2.5) => wire(id, from, to, "elv", mm2, 0.1);
const verdicts = (map: EnergyMap) =>
  new Map(deriveBenchSheet(map, rules, facts).map(({ key, computed }) => [key, computed?.verdict]));

/** A battery, an adapter socket behind a diode, and changeovers that each choose between two loads. */
function chooser(count: number): EnergyMap {
  const elements: Element[] = [
    part("battery", "BT1", "Battery", {
      chemistry: "lead-acid",
      cellsInSeries: 6,
      stringsInParallel: 1,
      capacityAh: 20,
      internalMilliohms: 30,
      maxDischargeAmps: 20,
      maxChargeAmps: 5,
    }),
    part("fuse", "F1", "Fuse", {
      standard: "blade",
      speed: "other",
      breakingLetter: "none",
      breakingAmps: 1000,
      acVolts: 0,
      dcVolts: 32,
      ratingAmps: 10,
    }),
    part("dc-inlet", "J1", "Socket", { volts: 14, maxAmps: 3, touchable: "yes" }),
    part("load", "LD0", "Socket's load", { supply: "dc", amps: 1, heating: "no" }),
  ];
  const conductors = [
    elv("W0", "BT1.+", "F1.1"),
    elv("W1", "J1.-", "BT1.-"),
    elv("W2", "J1.+", "LD0.+"),
    elv("W3", "LD0.-", "BT1.-"),
  ];
  for (let index = 1; index <= count; index++) {
    elements.push(
      part("switch", `S${index}`, `Switch ${index}`, {
        poles: 1,
        throw: "changeover",
        promise: "function",
        gapMm: 1,
        acVolts: 250,
        acAmps: 20,
        dcVolts: 32,
        dcAmps: 20,
      }),
      part("load", `A${index}`, "First", { supply: "dc", amps: 0.5, heating: "no" }),
      part("load", `B${index}`, "Second", { supply: "dc", amps: 0.5, heating: "no" }),
    );
    conductors.push(
      elv(`C${index}`, "F1.2", `S${index}.1c`),
      elv(`D${index}`, `S${index}.1a`, `A${index}.+`),
      elv(`E${index}`, `S${index}.1b`, `B${index}.+`),
      elv(`G${index}`, `A${index}.-`, "BT1.-"),
      elv(`H${index}`, `B${index}.-`, "BT1.-"),
    );
  }
  return mapOf(elements, conductors);
}

const openKeys = ["conductors:BT1", "backfeed:BT1:J1", "backfeed:J1:BT1", "fuse:F1"];

test("six changeovers are worked out wholly, seven leave open what six let pass", () => {
  expect(openKeys.map((key) => verdicts(chooser(6)).get(key))).toEqual(openKeys.map(() => "pass"));
  expect(openKeys.map((key) => verdicts(chooser(7)).get(key))).toEqual(openKeys.map(() => "unknown"));
  const told = deriveBenchSheet(chooser(7), rules, facts)
    .find(({ key }) => key === "backfeed:BT1:J1")
    ?.computed?.reasons.map(({ text }) => text)
    .join("\n");
  expect(told).toContain("Not every position of S1 (Switch 1), S2 (Switch 2)");
  expect(told).toContain("S7 (Switch 7) was worked out together");
});

test.each([1, 4, 7])(
  "a thin wire and a way to the socket behind the off side of changeover %i are found",
  (which) => {
    const map = extended(
      chooser(7),
      [],
      [elv("BAD", `S${which}.1b`, "LD0.+", 0.14 + 0.01), elv("BJ", `S${which}.1b`, "J1.+")],
    );
    expect(["conductors:BT1", "backfeed:BT1:J1"].map((key) => verdicts(map).get(key))).toEqual([
      "fail",
      "fail",
    ]);
  },
);

test("a changeover whose other side is bare needs no position of its own", () => {
  const count = (map: EnergyMap) => settingsOf(circuitOf(viewOf(map)), () => null).positions.length;
  expect(count(chooser(3))).toBe(8);
  const bare: EnergyMap = {
    ...chooser(3),
    conductors: chooser(3).conductors.filter(({ id }) => id !== "E2"),
  };
  expect(count(bare)).toBe(4);
});

/** Fuses in rings with cross-links: far more ways than a unit has. */
function mesh(size: number): EnergyMap {
  const elements: Element[] = [
    part("battery", "BT1", "Battery", {
      chemistry: "lead-acid",
      cellsInSeries: 6,
      stringsInParallel: 1,
      capacityAh: 20,
      internalMilliohms: 30,
      maxDischargeAmps: 100,
      maxChargeAmps: 5,
    }),
  ];
  const conductors = [elv("W0", "BT1.+", "F0.1")];
  for (let index = 0; index < size; index++) {
    elements.push(
      part("fuse", `F${index}`, `Fuse ${index}`, {
        standard: "blade",
        ratingAmps: 1,
        dcVolts: 32,
        acVolts: 0,
      }),
      part("load", `L${index}`, `Load ${index}`, { supply: "dc", amps: 0.1, heating: "no" }),
    );
    conductors.push(
      elv(`A${index}`, `F${index}.2`, `F${(index + 1) % size}.1`),
      elv(`B${index}`, `F${index}.2`, `F${(index * 7 + 3) % size}.1`),
      elv(`C${index}`, `F${index}.2`, `L${index}.+`),
      elv(`D${index}`, `L${index}.-`, "BT1.-"),
    );
  }
  return mapOf(elements, conductors);
}

test("a map too meshed to be worked out leaves its conductors open, the same every time", () => {
  const map = mesh(99);
  const found = analyse(map, rules, facts).fusing.conductors;
  const open = found.filter(({ text }) => text.includes("too meshed"));
  expect(open.length).toBeGreaterThan(0);
  expect(open.every(({ verdict }) => verdict === "unknown")).toBe(true);
  expect(verdicts(map).get("conductors:BT1")).not.toBe("pass");
  expect(analyse(map, rules, facts).fusing.conductors).toEqual(found);
  expect(analyse(mesh(5), rules, facts).fusing.conductors.some(({ text }) => text.includes("meshed"))).toBe(
    false,
  );
});
