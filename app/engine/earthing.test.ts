import { expect, test } from "vitest";

import {
  answersOf,
  battery,
  directSupply,
  earth,
  factsI,
  factsII,
  inverter,
  low,
  mains,
  mainsOutlet,
  mainsSwitch,
  soundBox,
} from "./box-for-tests";
import { extended, mapOf, part, withData, without } from "./map-builder";

// Earth in class I: everything that belongs to it is joined to the pin, by conductors that can carry a fault.

const withOutlet = extended(
  soundBox,
  [mainsOutlet()],
  [mains("Q1", "S1.1b", "XO1.L"), mains("Q2", "S1.2b", "XO1.N"), earth("Q3", "PE1.PE", "XO1.PE")],
);

test("a sound box is earthed, its outlet too", () => {
  expect(answersOf(soundBox).verdict("earth-path")).toBe("pass");
  expect(answersOf(withOutlet).verdict("earth-path")).toBe("pass");
});

test("an earth pin joined to nothing fails and is refused", () => {
  // The only earthed things hang on each other; no part that can be touched is on the map.
  const adrift = extended(
    without(soundBox, "MP1", "WE1"),
    [directSupply()],
    [mains("Q1", "S1.1b", "PS1.L"), mains("Q2", "S1.2b", "PS1.N"), earth("Q3", "PE1.PE", "PS1.PE")],
  );
  const found = answersOf(adrift);
  expect(found.verdict("earth-path")).toBe("fail");
  expect(found.reasons("earth-path")).toContain("PE1 (Stud) is not joined to the earth pin.");
  expect(found.reasons("earth-path")).toContain(
    "The earth pin of X1 (Inlet) is joined to no protective conductor.",
  );
  expect(found.refused).toContain("X1 (Inlet): its earth pin is connected to nothing.");
  expect(answersOf(withData(soundBox, "X1", { earthPin: "no" })).verdict("earth-path")).toBe("fail");
});

test("an outlet's earth contact that is joined to nothing fails", () => {
  const found = answersOf(without(withOutlet, "Q3"));
  expect(found.verdict("earth-path")).toBe("fail");
  expect(found.said("danger")).toContain(
    "The earth contact of XO1 (Mains outlet) is not joined to the earth pin.",
  );
});

test("nothing to judge is unknown, never a pass", () => {
  // The pin leads to a suppression capacitor only; every part is double insulated.
  const bare = extended(
    without(withData(soundBox, "MP1", { reinforcedFromMains: "yes" }), "PE1"),
    [part("y-capacitor", "CY1", "Filter", { nanofarads: 2.2, safetyClass: "Y2" })],
    [mains("Q1", "S1.1b", "CY1.1"), earth("Q2", "CY1.2", "X1.PE")],
  );
  expect(answersOf(bare).verdict("earth-path")).toBe("unknown");
  const map = without(withData(soundBox, "MP1", { reinforcedFromMains: "yes" }), "PE1");
  expect(answersOf(map).verdict("earth-path")).not.toBe("pass");
  expect(answersOf(withOutlet, factsII).verdict("earth-path")).toBe("unknown");
});

test("only a protective conductor as large as the mains conductors earths a part", () => {
  const by = (mm2: number | null, circuit: "earth" | "elv" = "earth") => ({
    ...soundBox,
    conductors: soundBox.conductors.map((each) =>
      each.id === "WE2" ? { ...each, circuit, area: mm2 === null ? null : { mm2 } } : each,
    ),
  });
  const verdict = (mm2: number | null, circuit?: "earth" | "elv") =>
    answersOf(by(mm2, circuit)).verdict("earth-path");
  // IEC 60364-5-54, 543.1, from memory: equal to the line up to 16 mm². The mains conductors here have 0.75 mm².
  expect([verdict(0.75), verdict(0.7), verdict(0.05), verdict(null)]).toEqual([
    "pass",
    "fail",
    "fail",
    "unknown",
  ]);
  expect(verdict(0.05, "elv")).toBe("fail");
  expect(verdict(1.5, "elv")).toBe("fail");
  expect(answersOf(by(0.05)).said("danger")).toContain(
    "WE2 of 0.05 mm² is thinner than the 0.75 mm² of the mains conductors",
  );
  // A thin second way beside a thick one does no harm.
  const beside = extended(soundBox, [], [earth("A1", "PE1.PE", "MP1.surface", 0.1)]);
  expect(answersOf(beside).verdict("earth-path")).toBe("pass");
});

test("an earth pin that may not be there leaves the way to earth open", () => {
  const found = answersOf(withData(soundBox, "X1", { earthPin: "unknown" }));
  expect(found.verdict("earth-path")).toBe("unknown");
  expect(found.reasons("earth-path")).toContain("whether X1 (Inlet) has an earth pin is not known");
  // The case is then not plainly unearthed either.
  expect(found.verdict("insulation-clearance:MP1") ?? found.verdict("insulation-barrier:MP1")).toBe(
    "unknown",
  );
});

test("a supply that leaks to earth needs one, one without a connection to it doesn't", () => {
  const supplied = (leakageMilliamps: number | null) =>
    answersOf(
      extended(
        soundBox,
        [directSupply({ leakageMilliamps }), part("load", "LD2", "Low load", { supply: "dc", amps: 0.5 })],
        [
          mains("Q1", "S1.1b", "PS1.L"),
          mains("Q2", "S1.2b", "PS1.N"),
          low("Q4", "PS1.+", "LD2.+"),
          low("Q5", "PS1.-", "LD2.-"),
        ],
      ),
    ).verdict("earth-path");
  expect([supplied(0), supplied(0.3), supplied(null)]).toEqual(["pass", "fail", "unknown"]);
});

test("a battery inverter without a mains inlet has its earth judged as one with an inlet", () => {
  const station = mapOf(
    [
      battery(),
      mainsSwitch("S2", { poles: 1, promise: "function", dcVolts: 32, dcAmps: 40 }),
      inverter(),
      mainsOutlet(),
      part("earth-terminal", "PE1", "Stud", { lockedFixing: "yes" }),
      part("accessible-part", "MP1", "Case", { clearanceMm: 6, creepageMm: 8, reinforcedFromMains: "no" }),
    ],
    [
      low("W1", "BT1.+", "S2.1a", 6),
      low("W2", "S2.1b", "U1.in+", 6),
      low("W3", "U1.in-", "BT1.-", 6),
      mains("W4", "U1.L", "XO1.L"),
      mains("W5", "U1.N", "XO1.N"),
      earth("WE1", "PE1.PE", "XO1.PE"),
      earth("WE2", "PE1.PE", "MP1.surface"),
    ],
  );
  const found = answersOf(station);
  expect(found.verdict("earth-path")).toBe("pass");
  expect(found.keys.filter((key) => key.startsWith("earth-bond"))).toEqual([
    "earth-bond:MP1",
    "earth-bond:XO1",
  ]);
  expect(found.keys.some((key) => key.startsWith("insulation-earth"))).toBe(true);
  expect(found.keys.some((key) => key.startsWith("touch-current"))).toBe(true);

  const open = answersOf(without(station, "WE1", "WE2"));
  expect(open.verdict("earth-path")).toBe("fail");
  expect(open.reasons("earth-path")).toContain("The earth contact of XO1 (Mains outlet) is not joined");
  const bare = answersOf(without(station, "PE1", "MP1"));
  expect(bare.verdict("earth-path")).toBe("fail");
  expect(bare.refused).toContain("A class I unit needs its protective-earth terminal on the map.");
  expect(answersOf(station, factsI).refused).toEqual([]);
});
