import { expect, test } from "vitest";

import { demoMaps } from "./demo-maps";
import type { Element, EnergyMap } from "./energy-map";
import { extended, mapOf, part, wire, without } from "./map-builder";
import { starterMaps } from "./starter-maps";
import { submissionProblems } from "./submission";

// Labels against what feeds them. The limits are those of IEC 61140: 50 V alternating and 120 V direct end extra-low voltage.

const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "II" as const };
const refused = (map: EnergyMap) => submissionProblems(map, facts).map(({ text }) => text);

const inlet = part("mains-inlet", "X1", "Plug", {
  earthPin: "no",
  polarised: "no",
  upstreamAmps: 16,
  prospectiveAmps: 300,
});
const battery = (id: string, cellsInSeries = 6) =>
  part("battery", id, id, {
    chemistry: "lead-acid",
    cellsInSeries,
    stringsInParallel: 1,
    capacityAh: 20,
    internalMilliohms: 30,
    maxDischargeAmps: 20,
    maxChargeAmps: 5,
  });
const load = (id: string, supply: "mains" | "dc") => part("load", id, id, { supply, amps: 1, heating: "no" });

test.each([
  ["outlet", part("outlet", "Y1", "Jack", { supply: "dc", maxAmps: 1, touchable: "yes" }), "+", "-"],
  ["load", load("Y1", "dc"), "+", "-"],
  ["fan", part("fan", "Y1", "Fan", { supply: "dc", amps: 0.1 }), "+", "-"],
  ["inlet", part("dc-inlet", "Y1", "Socket", { volts: 12, maxAmps: 1, touchable: "yes" }), "+", "-"],
] as const)(
  "mains on a direct-voltage %s is refused, however the wires are called",
  (_kind, element, plus, minus) => {
    for (const circuit of ["mains", "elv"] as const) {
      const map = mapOf(
        [inlet, element],
        [
          wire("W1", "X1.L", `Y1.${plus}`, circuit, 0.75, 1),
          wire("W2", "X1.N", `Y1.${minus}`, circuit, 0.75, 1),
        ],
      );
      expect(refused(map).join("\n")).toMatch(
        /Y1 \(.*\) takes direct voltage, but X1 \(Plug\) puts mains on it/,
      );
    }
    // One pole is enough.
    expect(
      refused(mapOf([inlet, element], [wire("W1", "X1.N", `Y1.${minus}`, "mains", 0.75, 1)])).join("\n"),
    ).toContain("puts mains on it");
  },
);

function isolatingTransformer(secondaryVolts: number, circuit: "mains" | "elv"): EnergyMap {
  return mapOf(
    [
      inlet,
      part("transformer", "T1", "Transformer", {
        insulation: "reinforced",
        secondaryVolts,
        voltAmperes: 100,
      }),
      part("outlet", "XO1", "Outlet", { supply: "mains", maxAmps: 0.4, touchable: "no" }),
    ],
    [
      wire("W1", "X1.L", "T1.L", "mains", 0.75, 1),
      wire("W2", "X1.N", "T1.N", "mains", 0.75, 1),
      wire("W3", "T1.S1", "XO1.L", circuit, 0.75, 1),
      wire("W4", "T1.S2", "XO1.N", circuit, 0.75, 1),
    ],
  );
}

test("the class of a conductor follows from its volts: 50 V alternating is extra-low, more is not", () => {
  expect(refused(isolatingTransformer(50, "elv"))).toEqual([]);
  expect(refused(isolatingTransformer(50, "mains"))).toEqual([
    "W3 is said to be mains, but only T1 (Transformer) feeds it.",
    "W4 is said to be mains, but only T1 (Transformer) feeds it.",
  ]);
  expect(refused(isolatingTransformer(230, "mains"))).toEqual([]);
  expect(refused(isolatingTransformer(230, "elv"))[0]).toBe(
    "W3 is said to be extra-low voltage, but T1 (Transformer) puts 230 V alternating on it: above 50 V alternating or 120 V direct call it mains.",
  );
});

function batteries(count: number, cells: number): EnergyMap {
  const ids = Array.from({ length: count }, (_, index) => `BT${index + 1}`);
  const links = ids
    .slice(1)
    .map((id, index) => wire(`L${index}`, `BT${index + 1}.+`, `${id}.-`, "elv", 2.5, 0.1));
  return mapOf(
    [...ids.map((id) => battery(id, cells)), load("LD1", "dc")],
    [
      ...links,
      wire("W1", `BT${count}.+`, "LD1.+", "elv", 2.5, 0.1),
      wire("W2", "LD1.-", "BT1.-", "elv", 2.5, 0.1),
    ],
  );
}

test("batteries in series add up: 8 of 14.7 V are extra-low voltage, 9 are not", () => {
  expect(refused(batteries(8, 6))).toEqual([]);
  expect(refused(batteries(9, 6)).some((text) => text.includes("puts 132.3 V direct on it"))).toBe(true);
});

test("a wire from the battery's plus called protective earth is refused, a bonded minus is not", () => {
  const map = mapOf(
    [battery("BT1"), load("LD1", "dc")],
    [wire("W1", "BT1.+", "LD1.+", "earth", 0.14, 1), wire("W2", "LD1.-", "BT1.-", "elv", 1, 1)],
  );
  expect(refused(map)).toEqual([
    "W1 is said to be protective earth, but BT1 (BT1) feeds it from its plus pole.",
  ]);
  const bonded = extended(demoMaps.sound, [], [wire("WB", "PE1.PE", "BM1.P-", "earth", 1.5, 0.2)]);
  expect(refused(bonded)).toEqual([]);
});

test("a load that nothing feeds is refused, one in series with another is not called unfed", () => {
  const island: Element[] = [load("LD8", "dc"), load("LD9", "dc")];
  const lone = extended(demoMaps.soundLamp, island, [
    wire("Q1", "LD8.+", "LD9.+", "elv", 1, 1),
    wire("Q2", "LD8.-", "LD9.-", "elv", 1, 1),
  ]);
  expect(refused(lone)).toEqual([
    "LD8 (LD8) is wired, but no source on the map feeds it.",
    "LD9 (LD9) is wired, but no source on the map feeds it.",
  ]);
  const inSeries = mapOf(
    [battery("BT1"), ...island],
    [
      wire("Q1", "BT1.+", "LD8.+", "elv", 1, 1),
      wire("Q2", "LD8.-", "LD9.+", "elv", 1, 1),
      wire("Q3", "LD9.-", "BT1.-", "elv", 1, 1),
    ],
  );
  expect(refused(inSeries)).toEqual([]);
});

test("crossed poles and a mains load on a battery are refused", () => {
  const crossed = mapOf(
    [battery("BT1"), load("LD1", "dc")],
    [wire("W1", "BT1.-", "LD1.+", "elv", 1, 1), wire("W2", "BT1.+", "LD1.-", "elv", 1, 1)],
  );
  expect(refused(crossed)).toEqual(["LD1 (LD1) is connected to BT1 (BT1) with plus and minus crossed."]);
  const direct = mapOf(
    [battery("BT1"), load("LD1", "mains")],
    [wire("W1", "BT1.+", "LD1.L", "elv", 1, 1), wire("W2", "BT1.-", "LD1.N", "elv", 1, 1)],
  );
  expect(refused(direct)).toEqual([
    "LD1 (LD1) takes alternating voltage, but only direct voltage from BT1 (BT1) is put on it.",
  ]);
});

test("starters and sound demo maps contradict nothing", () => {
  for (const { map } of starterMaps)
    expect(refused(without(map)).filter((text) => !text.includes("class I"))).toEqual([]);
});
