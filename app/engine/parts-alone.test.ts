import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import { demoMaps } from "./demo-maps";
import type { EnergyMap } from "./energy-map";
import { extended, mapOf, part, wire, withData, without } from "./map-builder";
import { ruleSets } from "./rule-set";
import { starterMaps } from "./starter-maps";

// Touched voltages (IEC 61140: 25 V alternating, 60 V direct) and parts beyond their ratings.

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "II" as const };
const verdict = (map: EnergyMap, key: string) =>
  deriveBenchSheet(map, rules, facts).find((check) => check.key === key)?.computed?.verdict;
const dangers = (map: EnergyMap) =>
  analyse(map, rules, facts)
    .statements.filter(({ level }) => level === "danger")
    .map(({ text }) => text)
    .join("\n");
const starter = (key: string): EnergyMap =>
  starterMaps.find((each) => each.key === key)?.map ?? demoMaps.sound;

function supplied(outputVolts: number, touchable: "yes" | "no" | "unknown"): EnergyMap {
  return extended(
    without(withData(demoMaps.soundLamp, "PS1", { outputVolts }), "LD1", "W6", "W7"),
    [part("outlet", "XO1", "Jack", { supply: "dc", maxAmps: 0.2, touchable })],
    [wire("W6", "PS1.+", "XO1.+", "elv", 0.75, 0.2), wire("W7", "PS1.-", "XO1.-", "elv", 0.75, 0.2)],
  );
}

test("direct voltage on contacts that can be touched: 60 V passes, more fails, not known stays open", () => {
  expect(verdict(supplied(60, "yes"), "touch-voltage:XO1")).toBeUndefined();
  expect(verdict(supplied(61, "yes"), "touch-voltage:XO1")).toBe("fail");
  expect(verdict(supplied(61, "unknown"), "touch-voltage:XO1")).toBe("unknown");
  expect(verdict(supplied(61, "no"), "touch-voltage:XO1")).toBeUndefined();
  expect(verdict(withData(supplied(61, "yes"), "PS1", { outputVolts: null }), "touch-voltage:XO1")).toBe(
    "unknown",
  );
  expect(dangers(supplied(400, "yes"))).toContain(
    "XO1 (Jack) can be touched and carries 400 V direct from PS1",
  );
});

test("a touched metal part on either pole of 400 V is a danger", () => {
  for (const pole of ["+", "-"]) {
    const map = extended(
      supplied(400, "no"),
      [],
      [wire("W8", `PS1.${pole}`, "MP1.surface", "elv", 0.75, 0.1)],
    );
    expect(verdict(map, "touch-voltage:MP1")).toBe("fail");
    expect(verdict(withData(map, "PS1", { outputVolts: 24 }), "touch-voltage:MP1")).toBeUndefined();
  }
});

test("alternating voltage on touched contacts: 25 V passes, 26 V and an isolated 230 V fail", () => {
  const behind = (secondaryVolts: number) =>
    mapOf(
      [
        part("mains-inlet", "X1", "Plug", {
          earthPin: "no",
          polarised: "no",
          upstreamAmps: 16,
          prospectiveAmps: 300,
        }),
        part("transformer", "T1", "Transformer", {
          insulation: "reinforced",
          secondaryVolts,
          voltAmperes: 100,
        }),
        part("outlet", "XO1", "Outlet", { supply: "mains", maxAmps: 0.4, touchable: "yes" }),
      ],
      [
        wire("W1", "X1.L", "T1.L", "mains", 0.75, 1),
        wire("W2", "X1.N", "T1.N", "mains", 0.75, 1),
        wire("W3", "T1.S1", "XO1.L", "mains", 0.75, 1),
        wire("W4", "T1.S2", "XO1.N", "mains", 0.75, 1),
      ],
    );
  expect([25, 26, 230].map((volts) => verdict(behind(volts), "touch-voltage:XO1"))).toEqual([
    undefined,
    "fail",
    "fail",
  ]);
});

test("batteries that add up to more than may be touched", () => {
  const ids = ["BT1", "BT2", "BT3", "BT4", "BT5"];
  const map = (count: number) =>
    mapOf(
      [
        ...ids
          .slice(0, count)
          .map((id) => part("battery", id, id, { chemistry: "lead-acid", cellsInSeries: 6 })),
        part("outlet", "XO1", "Jack", { supply: "dc", maxAmps: 1, touchable: "yes" }),
      ],
      [
        ...ids
          .slice(1, count)
          .map((id, index) => wire(`L${index}`, `${ids[index]}.+`, `${id}.-`, "elv", 1, 0.1)),
        wire("W1", `BT${count}.+`, "XO1.+", "elv", 1, 0.1),
        wire("W2", "BT1.-", "XO1.-", "elv", 1, 0.1),
      ],
    );
  expect(verdict(map(4), "touch-voltage:XO1")).toBeUndefined();
  expect(verdict(map(5), "touch-voltage:XO1")).toBe("fail");
});

test.each([
  ["battery-backup-box", "DI1", { ratedAmps: 4.9 }, "fail"],
  ["battery-backup-box", "DI1", { maxVolts: 14 }, "fail"],
  ["battery-backup-box", "DI1", { ratedAmps: null }, "unknown"],
  ["battery-charger", "D1", { ratedAmps: 1.9 }, "fail"],
  ["battery-charger", "D1", { reverseVolts: 14 }, "fail"],
  ["battery-charger", "D1", { reverseVolts: null }, "unknown"],
  ["battery-backup-box", "BT1", { maxDischargeAmps: 7 }, "fail"],
  ["battery-backup-box", "BT1", { maxDischargeAmps: null }, "unknown"],
  ["battery-backup-box", "BM1", { overVoltsPerCell: 4.5 }, "fail"],
  ["battery-backup-box", "BM1", { underVoltsPerCell: 1 }, "fail"],
  ["battery-backup-box", "BM1", { overVoltsPerCell: null }, "unknown"],
  ["audio-amplifier", "CX1", { safetyClass: "none" }, "fail"],
  ["audio-amplifier", "CX1", { safetyClass: "unknown" }, "unknown"],
  ["audio-amplifier", "CY1", { safetyClass: "none" }, "fail"],
  ["audio-amplifier", "PE1", { lockedFixing: "no" }, "fail"],
  ["audio-amplifier", "PE1", { lockedFixing: "unknown" }, "unknown"],
] as const)("%s: %s with %j is %s, as it stands it needs no step", (key, id, data, expected) => {
  expect(verdict(starter(key), `part-rating:${id}`)).toBeUndefined();
  expect(verdict(withData(starter(key), id, data), `part-rating:${id}`)).toBe(expected);
});

test("a thermal cut-out is judged by its own ratings", () => {
  const fitted = (data: Record<string, unknown>) =>
    extended(
      without(demoMaps.soundLamp, "W2"),
      [
        part("thermal-cutout", "TC1", "Cut-out", {
          temperatureC: 100,
          reset: "manual",
          ratingAmps: 1,
          acVolts: 250,
          dcVolts: 0,
          ...data,
        }),
      ],
      [wire("W2", "F1.2", "TC1.1", "mains", 0.75, 0.1), wire("W2B", "TC1.2", "S1.1a", "mains", 0.75, 0.1)],
    );
  expect(verdict(fitted({}), "part-rating:TC1")).toBeUndefined();
  expect(verdict(fitted({ ratingAmps: 0.1 }), "part-rating:TC1")).toBe("fail");
  expect(verdict(fitted({ acVolts: 12 }), "part-rating:TC1")).toBe("fail");
  expect(verdict(fitted({ acVolts: null }), "part-rating:TC1")).toBe("unknown");
});

test("a bare LED and bare conductors on mains stay open", () => {
  const lamp = () =>
    extended(
      demoMaps.soundLamp,
      [part("indicator", "H9", "Lamp", { meaning: "other", amps: 0.001 })],
      [wire("Q1", "S1.1b", "H9.1", "mains", 0.75, 0.1), wire("Q2", "S1.2b", "H9.2", "mains", 0.75, 0.1)],
    );
  expect(verdict(withData(lamp(), "H9", { lamp: "led" }), "part-rating:H9")).toBe("unknown");
  expect(verdict(withData(lamp(), "H9", { lamp: "neon" }), "part-rating:H9")).toBeUndefined();
  const bare: EnergyMap = {
    ...demoMaps.soundLamp,
    conductors: demoMaps.soundLamp.conductors.map((each) =>
      each.id === "W2" ? { ...each, insulation: "none" as const } : each,
    ),
  };
  expect(verdict(bare, "part-rating:F1")).toBe("unknown");
});
