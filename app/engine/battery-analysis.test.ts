import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { analyseBatteries } from "./battery-analysis";
import { deriveBenchSheet } from "./bench-sheet";
import { circuitOf } from "./circuit";
import { demoMaps } from "./demo-maps";
import type { ElementOf, EnergyMap } from "./energy-map";
import { extended, mapOf, part, withData, without, wire } from "./map-builder";
import { viewOf } from "./map-view";
import { ruleSets } from "./rule-set";

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "II" } as const;

const lead = (id: string, data: Partial<ElementOf<"battery">> = {}) =>
  part("battery", id, "", {
    chemistry: "lead-acid",
    cellsInSeries: 6,
    stringsInParallel: 1,
    capacityAh: 20,
    internalMilliohms: 30,
    maxDischargeAmps: 20,
    maxChargeAmps: 5,
    ...data,
  });
const jack = (volts: number | null) => part("dc-inlet", "J1", "", { volts, maxAmps: 3, touchable: "yes" });
const straight = (volts: number | null) =>
  mapOf(
    [jack(volts), lead("BT1")],
    [wire("W1", "J1.+", "BT1.+", "elv", 2.5, 0.1), wire("W2", "J1.-", "BT1.-", "elv", 2.5, 0.1)],
  );
const report = (map: EnergyMap, id = "BT1") =>
  analyseBatteries(circuitOf(viewOf(map))).find(({ battery }) => battery === id);

test.each([
  // Six lead-acid cells allow 6 · 2.45 V = 14.7 V.
  [24, "fail"],
  [14.7, "pass"],
  [14.8, "fail"],
  [null, "unknown"],
] as const)("a socket of %s V straight on a 12 V block is judged by its voltage: %s", (volts, verdict) => {
  const found = report(straight(volts));
  expect(found?.verdict).toBe(verdict);
  expect(found?.findings.map(({ text }) => text).join("\n")).not.toContain("nothing on the map charges it");
});

test("a supply, a converter and another battery on the poles are judged like a charger", () => {
  const supplied = mapOf(
    [
      part("mains-inlet", "X1", "", { earthPin: "no" }),
      part("isolated-supply", "PS1", "", {
        insulation: "reinforced",
        outputVolts: 24,
        outputAmps: 2,
        conductsBackwards: "no",
      }),
      lead("BT1"),
    ],
    [
      wire("W1", "X1.L", "PS1.L", "mains", 0.75, 0.1),
      wire("W2", "X1.N", "PS1.N", "mains", 0.75, 0.1),
      wire("W3", "PS1.+", "BT1.+", "elv", 2.5, 0.1),
      wire("W4", "PS1.-", "BT1.-", "elv", 2.5, 0.1),
    ],
  );
  expect(report(supplied)?.verdict).toBe("fail");
  expect(report(withData(supplied, "PS1", { outputVolts: 13.8 }))?.verdict).toBe("pass");
  const twins = mapOf(
    [lead("BT1"), lead("BT2")],
    [wire("W1", "BT1.+", "BT2.+", "elv", 2.5, 0.1), wire("W2", "BT1.-", "BT2.-", "elv", 2.5, 0.1)],
  );
  expect(report(twins)?.verdict).toBe("unknown");
});

test("a charger across two blocks in series leaves open what each gets; alone they are charged by nothing", () => {
  const stack = mapOf(
    [jack(29), lead("BT1"), lead("BT2")],
    [
      wire("W1", "J1.+", "BT2.+", "elv", 2.5, 0.1),
      wire("W2", "BT2.-", "BT1.+", "elv", 2.5, 0.1),
      wire("W3", "BT1.-", "J1.-", "elv", 2.5, 0.1),
    ],
  );
  expect([report(stack)?.verdict, report(stack, "BT2")?.verdict]).toEqual(["unknown", "unknown"]);
  expect(report(without(stack, "J1"))?.verdict).toBe("pass");
});

test("two chargers, each within the limit, may be above it together", () => {
  const two = extended(
    straight(14),
    [part("dc-inlet", "J2", "", { volts: 14, maxAmps: 3, touchable: "yes" })],
    [wire("W3", "J2.+", "BT1.+", "elv", 2.5, 0.1), wire("W4", "J2.-", "BT1.-", "elv", 2.5, 0.1)],
  );
  expect(report(two)?.verdict).toBe("unknown");
  expect(report(withData(two, "BT1", { maxChargeAmps: 6 }))?.verdict).toBe("pass");
});

/** Fuse at the pole, then the board: as good practice has it. */
const fuseFirst = extended(
  without(demoMaps.sound, "W8", "W10", "W11"),
  [],
  [
    wire("W8", "BT1.+", "F2.1", "elv", 2.5, 0.05, "silicone"),
    wire("W10", "F2.2", "BM1.B+", "elv", 2.5, 0.05, "silicone"),
    wire("W11", "BM1.P+", "S2.1a", "elv", 2.5, 0.15, "silicone"),
  ],
);

test("a fuse between pole and protection board is sound", () => {
  expect(report(fuseFirst)?.verdict).toBe("pass");
  const levels = analyse(fuseFirst, rules, { ...facts, protectionClass: "I" }).statements.filter(
    ({ family }) => family === "battery",
  );
  expect(levels.map(({ level }) => level)).toEqual(levels.map(() => "good"));
});

test("a load on the pack's own poles, before the board, is not protected by it", () => {
  const tapped = extended(
    fuseFirst,
    [part("load", "LD9", "", { supply: "dc", amps: 1, heating: "no" })],
    [wire("T1", "F2.2", "LD9.+", "elv", 1, 0.1), wire("T2", "LD9.-", "BT1.-", "elv", 1, 0.1)],
  );
  expect(report(tapped)?.verdict).toBe("fail");
});

test("each finding has its own level: a set-point too high doesn't blame the protection board", () => {
  const statements = analyse(withData(demoMaps.sound, "CH1", { setPointVolts: 15 }), rules, {
    ...facts,
    protectionClass: "I",
  }).statements.filter(({ family }) => family === "battery");
  expect(statements.filter(({ level }) => level === "defect").map(({ text }) => text)).toEqual([
    expect.stringContaining("is set to 15 V"),
  ]);
  expect(statements.find(({ text }) => text.includes("joined to the rest through BM1"))?.level).toBe("good");
});

test("a charger that gives nothing without a battery doesn't pass by reading nought", () => {
  const check = deriveBenchSheet(demoMaps.sound, rules, facts).find(
    ({ key }) => key === "charge-voltage:BT1:CH1",
  );
  expect(check?.asks).toMatchObject({ limit: { kind: "between", lower: 12.8, upper: 14.6 } });
});

test("parallel strings are asked about on the bench and told of as a caution", () => {
  const map = withData(demoMaps.sound, "BT1", { stringsInParallel: 3 });
  const check = deriveBenchSheet(map, rules, facts).find(({ key }) => key === "battery-state:BT1");
  expect(check?.asks.kind === "examination" && check.asks.question).toContain("its 3 strings");
  expect(
    analyse(map, rules, facts).statements.find(({ text }) => text.includes("3 strings in parallel"))?.level,
  ).toBe("caution");
});
