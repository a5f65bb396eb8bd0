import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import { demoMaps } from "./demo-maps";
import type { EnergyMap } from "./energy-map";
import { extended, part, wire, withData, without } from "./map-builder";
import { ruleSets } from "./rule-set";

// A plug's pins are parted from every pole of an inverter (IEC 62040-1, backfeed; from memory).

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I" as const,
  cordLengthM: 2,
  cordAreaMm2: 0.75,
};
const backfeed = (map: EnergyMap) =>
  deriveBenchSheet(map, rules, facts).find(({ key }) => key === "backfeed:BT1:X1")?.computed;
const paths = (map: EnergyMap) =>
  analyse(map, rules, facts).reverse.paths.map(({ poles, failed, certainty }) => [poles, failed, certainty]);

const station = demoMaps.inverterStation;
/** The relay changes over one pole only; the other pole of inverter, mains and outlet is joined for good. */
function onePoleRelay(joined: "L" | "N"): EnergyMap {
  const other = joined === "L" ? "N" : "L";
  const [mainsJoined, mainsOther] = joined === "L" ? ["S1.1b", "S1.2b"] : ["S1.2b", "S1.1b"];
  return extended(
    without(withData(station, "K1", { poles: 1 }), "W4", "W5", "W6", "W7", "W8", "W9"),
    [],
    [
      wire("N1", mainsJoined ?? "", `XO1.${joined}`, "mains", 0.75, 0.2),
      wire("N2", `U1.${joined}`, `XO1.${joined}`, "mains", 0.75, 0.2),
      wire("N3", mainsOther ?? "", "K1.1a", "mains", 0.75, 0.2),
      wire("N4", `U1.${other}`, "K1.1b", "mains", 0.75, 0.2),
      wire("N5", "K1.1c", `XO1.${other}`, "mains", 0.75, 0.2),
    ],
  );
}

test("a relay in the neutral alone leaves the inverter's line on the plug pins", () => {
  const found = backfeed(onePoleRelay("L"));
  expect(found?.verdict).toBe("fail");
  expect(found?.reasons[0]?.text).toBe(
    "The live pole that BT1 (Battery) feeds is joined with the plug pins of X1 (Appliance inlet) through F2, U1 (Inverter), S1 (Mains switch), F1 (Mains fuse). Whoever touches the pins touches it: every pole must be parted.".replace(
      "F2,",
      "F2 (Battery fuse),",
    ),
  );
  expect(paths(onePoleRelay("L"))).toEqual([["live", null, "certain"]]);
});

test("a relay in the line alone shares the neutral with the plug: not known, and welded it fails", () => {
  expect(paths(onePoleRelay("N"))).toContainEqual(["neutral", null, "certain"]);
  expect(paths(onePoleRelay("N"))).toContainEqual(["both", "K1", "certain"]);
  expect(backfeed(onePoleRelay("N"))?.verdict).toBe("fail");
  // Without anything that could weld, the shared neutral alone leaves it open.
  const byHand = withData(onePoleRelay("N"), "K1", { actuator: "hand" });
  expect(paths(byHand)).toEqual([["neutral", null, "certain"]]);
  expect(backfeed(byHand)?.verdict).toBe("unknown");
});

test("a relay in both poles parts both, and a relay for each pole fails when the one in the line welds", () => {
  expect(paths(station)).toEqual([["both", "K1", "certain"]]);
  const two = extended(
    without(withData(station, "K1", { poles: 1 }), "W5", "W7", "W9"),
    [
      part("switch", "K2", "Second relay", {
        poles: 1,
        throw: "changeover",
        actuator: "relay",
        coilFedBy: "X1",
        promise: "function",
      }),
    ],
    [
      wire("W5", "S1.2b", "K2.1a", "mains", 0.75, 0.2),
      wire("W7", "K2.1c", "XO1.N", "mains", 0.75, 0.2),
      wire("W9", "U1.N", "K2.1b", "mains", 0.75, 0.2),
    ],
  );
  expect(paths(two)).toEqual([
    ["live", "K1", "certain"],
    ["neutral", "K2", "certain"],
  ]);
  expect(backfeed(two)?.verdict).toBe("fail");
});
