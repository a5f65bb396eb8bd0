import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import { demoMaps } from "./demo-maps";
import type { Element, EnergyMap } from "./energy-map";
import { extended, mapOf, part, wire, withData, without } from "./map-builder";
import { ruleSets } from "./rule-set";
import { starterMaps } from "./starter-maps";

// Maps in which a fuse or a conductor looks right and is not.

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I" as const,
  cordLengthM: 2,
  cordAreaMm2: 0.75,
};
const computed = (map: EnergyMap, key: string, by: { supplyVolts?: number } = {}) =>
  deriveBenchSheet(map, rules, { ...facts, ...by }).find((check) => check.key === key)?.computed;
const verdict = (map: EnergyMap, key: string) => computed(map, key)?.verdict;
const reasons = (map: EnergyMap, key: string) =>
  (computed(map, key)?.reasons ?? []).map(({ text }) => text).join("\n");

const bench = starterMaps[0]?.map ?? demoMaps.sound;
const elv = (id: string, from: string, to: string, mm2 = 2.5, lengthM = 0.1) =>
  wire(id, from, to, "elv", mm2, lengthM);
const mains = (id: string, from: string, to: string, mm2 = 0.75) => wire(id, from, to, "mains", mm2, 0.2);
const battery = (id: string, data: Record<string, unknown> = {}): Element =>
  part("battery", id, id, {
    chemistry: "lead-acid",
    cellsInSeries: 6,
    stringsInParallel: 1,
    capacityAh: 20,
    internalMilliohms: 30,
    maxDischargeAmps: 60,
    maxChargeAmps: 5,
    ...data,
  });
const blade = (data: Record<string, unknown> = {}): Element =>
  part("fuse", "F1", "Fuse", {
    standard: "blade",
    speed: "other",
    breakingLetter: "none",
    breakingAmps: 1000,
    acVolts: 0,
    dcVolts: 32,
    ratingAmps: 10,
    ...data,
  });
const load = (id: string, amps: number): Element =>
  part("load", id, id, { supply: "dc", amps, heating: "no" });

function stack(count: number): EnergyMap {
  const ids = Array.from({ length: count }, (_, index) => `BT${index + 1}`);
  return mapOf(
    [...ids.map((id) => battery(id)), blade(), load("LD1", 5)],
    [
      ...ids.slice(1).map((id, index) => elv(`L${index}`, `BT${index + 1}.+`, `${id}.-`)),
      elv("W0", `BT${count}.+`, "F1.1"),
      elv("W1", "F1.2", "LD1.+"),
      elv("W2", "LD1.-", "BT1.-"),
    ],
  );
}

test("a fuse in a series of batteries breaks the sum of their voltages, and its load is not called nought", () => {
  // 14.7 V each: two make 29.4 V, three 44.1 V.
  expect(reasons(stack(2), "fuse:F1")).toContain("rated 32 V direct, enough for 29.4 V");
  expect(reasons(stack(3), "fuse:F1")).toContain("rated 32 V direct, too little for 44.1 V");
  expect(verdict(stack(3), "fuse:F1")).toBe("fail");
  expect(verdict(stack(2), "fuse:F1")).toBe("unknown");
  expect(reasons(stack(2), "fuse:F1")).not.toContain("load of 0 A");
  expect(verdict(stack(1), "fuse:F1")).toBe("pass");
});

test("a short across a series is fed by the sum of voltages through the sum of resistances", () => {
  // 29.4 V through 105 mΩ give 280 A; the upper battery alone gives 14.7 V through 100 mΩ, 147 A.
  const map = (breakingAmps: number) =>
    withData(
      withData(withData(stack(2), "BT1", { internalMilliohms: 5 }), "BT2", { internalMilliohms: 100 }),
      "F1",
      { breakingAmps },
    );
  expect(reasons(map(200), "fuse:F1")).toContain("breaks only 200 A, but BT2 (BT2) can drive 280 A");
  expect(verdict(map(200), "fuse:F1")).toBe("fail");
  expect(reasons(map(300), "fuse:F1")).toContain("breaks 300 A, and BT2 (BT2) can drive 280 A");
  expect(reasons(withData(map(300), "BT1", { internalMilliohms: null }), "fuse:F1")).toContain(
    "the short-circuit current from BT2 (BT2) is not known",
  );
});

test("what a battery in a series is discharged with is not called nought", () => {
  expect(verdict(stack(2), "part-rating:BT1")).toBe("unknown");
  expect(verdict(stack(1), "part-rating:BT1")).toBeUndefined();
});

test("the voltage of one battery in a series that is not known leaves the sum open", () => {
  const map = withData(stack(2), "BT1", { cellsInSeries: null });
  expect(reasons(map, "fuse:F1")).toContain("the voltage across it when it opens is not known");
});

test("loads in series are not computed, so what flows through their fuse is not known", () => {
  const map = mapOf(
    [battery("BT1", { cellsInSeries: 12 }), blade({ ratingAmps: 3 }), load("LD1", 20), load("LD2", 20)],
    [
      elv("W0", "BT1.+", "F1.1"),
      elv("W1", "F1.2", "LD1.+"),
      elv("W2", "LD1.-", "LD2.+"),
      elv("W3", "LD2.-", "BT1.-"),
    ],
  );
  expect(verdict(map, "fuse:F1")).toBe("unknown");
  expect(reasons(map, "fuse:F1")).toContain("not every load behind it is known");
});

test("a mains load that returns through earth is not called nought either", () => {
  const map = extended(
    bench,
    [part("load", "LD9", "Earth return", { supply: "mains", amps: 1, heating: "no" })],
    [mains("Q1", "S1.1b", "LD9.L"), mains("Q2", "LD9.N", "PE1.PE")],
  );
  expect(verdict(map, "fuse:F1")).not.toBe("pass");
});

test("the only fuse in the neutral: fails with a polarised plug, open when that is not known, told when reversible", () => {
  const inNeutral = (polarised: string) =>
    extended(
      without(withData(bench, "X1", { polarised }), "W1", "W2", "W3"),
      [],
      [mains("W1", "X1.L", "S1.1a"), mains("W2", "X1.N", "F1.1"), mains("W3", "F1.2", "S1.2a")],
    );
  expect(verdict(inNeutral("yes"), "fuse:F1")).toBe("fail");
  expect(reasons(inNeutral("yes"), "fuse:F1")).toContain("sits in the neutral of X1 (Appliance inlet)");
  expect(verdict(inNeutral("unknown"), "fuse:F1")).toBe("unknown");
  expect(verdict(inNeutral("no"), "fuse:F1")).toBe("pass");
  expect(reasons(inNeutral("no"), "fuse:F1")).toContain(
    "with the plug the other way round it is in the line",
  );
  expect(verdict(withData(bench, "X1", { polarised: "yes" }), "fuse:F1")).toBe("pass");
});

test("a reversible plug makes the neutral's thin wires line: both ways round are worked out", () => {
  const thin = (polarised: string): EnergyMap => {
    const map = withData(bench, "X1", { polarised, upstreamAmps: 32 });
    return {
      ...map,
      conductors: map.conductors.map((each) =>
        ["W3", "W5"].includes(each.id)
          ? { ...each, area: { mm2: 0.5 } }
          : each.id === "W1"
            ? { ...each, area: { mm2: 4 } }
            : each,
      ),
    };
  };
  expect(verdict(thin("yes"), "conductors:X1")).toBe("pass");
  expect(verdict(thin("no"), "conductors:X1")).toBe("unknown");
  expect(verdict(thin("unknown"), "conductors:X1")).toBe("unknown");
  expect(reasons(thin("no"), "conductors:X1")).toContain(
    "With the plug the other way round: W3 may carry 3 A",
  );
});

test("a letter for alternating current says nothing of a battery's, and the smaller of letter and figure counts", () => {
  const onBattery = (data: Record<string, unknown>) =>
    mapOf(
      [
        battery("BT1"),
        blade({ standard: "iec-60127", breakingLetter: "H", breakingAmps: null, dcVolts: 60, ...data }),
        load("LD1", 4),
      ],
      [elv("W0", "BT1.+", "F1.1"), elv("W1", "F1.2", "LD1.+"), elv("W2", "LD1.-", "BT1.-")],
    );
  expect(verdict(onBattery({}), "fuse:F1")).toBe("unknown");
  expect(verdict(onBattery({ breakingAmps: 500 }), "fuse:F1")).toBe("pass");
  // IEC 60127-2: letter L stands for 35 A up to 3.15 A; 300 A are to be expected at the socket.
  const low = withData(bench, "F1", { breakingLetter: "L", breakingAmps: 1500 });
  expect(verdict(low, "fuse:F1")).toBe("fail");
  expect(reasons(low, "fuse:F1")).toContain(
    "1500 A is entered as its breaking capacity, but its type stands for 35 A",
  );
});

test("a battery's plus called earth is judged as the conductor that it is", () => {
  const map = mapOf(
    [battery("BT1"), load("LD1", 5)],
    [wire("W0", "BT1.+", "LD1.+", "earth", 0.5, 2), elv("W1", "LD1.-", "BT1.-")],
  );
  expect(verdict(map, "conductors:BT1")).toBe("fail");
  expect(reasons(map, "conductors:BT1")).toContain(
    "No fuse or breaker limits what BT1 (BT1) can drive through W0",
  );
});

test("an inverter's 230 V count where the country's mains has 120 V", () => {
  const map = extended(
    without(demoMaps.inverterStation, "W6"),
    [
      part("fuse", "F3", "Outlet fuse", {
        standard: "iec-60127",
        speed: "T",
        breakingLetter: "H",
        breakingAmps: 1500,
        acVolts: 125,
        dcVolts: 0,
        ratingAmps: 2,
      }),
    ],
    [mains("W6", "K1.1c", "F3.1"), mains("W6B", "F3.2", "XO1.L")],
  );
  const found = computed(map, "fuse:F3", { supplyVolts: 120 });
  expect(found?.verdict).toBe("fail");
  expect(found?.reasons.map(({ text }) => text).join("\n")).toContain(
    "rated 125 V alternating, too little for 230 V",
  );
  const barrier = (volts: number) =>
    analyse(map, rules, { ...facts, supplyVolts: volts }).insulation.barriers.map(
      ({ clearanceMm }) => clearanceMm,
    );
  expect(barrier(120)).toEqual(barrier(230));
});

test("where the table ends a thicker conductor is not failed, and one of the table's last row still is", () => {
  const system = (mm2: number, lengthM = 0.1) =>
    mapOf(
      [
        battery("BT1", { maxDischargeAmps: 100 }),
        blade({ standard: "class-t", ratingAmps: 100, breakingAmps: 20_000, dcVolts: 125 }),
        load("LD1", 80),
      ],
      [
        elv("W0", "BT1.+", "F1.1", mm2, lengthM),
        elv("W1", "F1.2", "LD1.+", mm2),
        elv("W2", "LD1.-", "BT1.-", mm2),
      ],
    );
  expect(verdict(system(25), "conductors:BT1")).toBe("unknown");
  expect(reasons(system(25), "conductors:BT1")).toContain(
    "W1 is thicker than the table goes (63 A at its end)",
  );
  expect(verdict(system(10), "conductors:BT1")).toBe("fail");
  // The lead before the fuse is too long for any thickness.
  expect(verdict(system(25, 0.5), "conductors:BT1")).toBe("fail");
});
