import { expect, test } from "vitest";

import {
  answersOf,
  directSupply,
  earthing,
  factsII,
  inlet,
  low,
  mains,
  mainsFuse,
  mainsLoad,
  mainsSwitch,
  metalCase,
  soundBox,
} from "./box-for-tests";
import type { Element, EnergyMap } from "./energy-map";
import { extended, mapOf, part, withData, without } from "./map-builder";

// What off means: every consumer judged by the switches that part both its poles, by a set of switches too.

type Data = Record<string, unknown>;
const front = (...more: Element[]) => [inlet(), mainsFuse(), ...more, ...metalCase];
const oneSwitch = (data: Data, switched: "L" | "N", plug: Data = {}): EnergyMap =>
  withData(
    mapOf(
      front(mainsSwitch("S1", { poles: 1, ...data }), mainsLoad()),
      switched === "L"
        ? [
            mains("W1", "X1.L", "F1.1"),
            mains("W2", "F1.2", "S1.1a"),
            mains("W3", "S1.1b", "LD1.L"),
            mains("W4", "X1.N", "LD1.N"),
            ...earthing,
          ]
        : [
            mains("W1", "X1.L", "F1.1"),
            mains("W2", "F1.2", "LD1.L"),
            mains("W3", "X1.N", "S1.1a"),
            mains("W4", "S1.1b", "LD1.N"),
            ...earthing,
          ],
    ),
    "X1",
    plug,
  );

test("a load that returns over earth leaves one pole only, which is no switching of both", () => {
  const map = extended(
    without(oneSwitch({}, "L"), "W4"),
    [part("indicator", "H1", "Lamp", { lamp: "neon", meaning: "mains-present", amps: 0.001 })],
    [mains("W4", "LD1.N", "PE1.PE"), mains("W5", "X1.L", "H1.1"), mains("W6", "X1.N", "H1.2")],
  );
  const found = answersOf(map);
  expect(found.verdict("all-pole-switch:X1")).toBe("fail");
  expect(found.said("danger", "good")).not.toContain("line and neutral of X1 (Inlet) together");
  expect(found.said("danger")).toContain("breaks only the line of X1");
});

const twoBranches = (first: Data, second: Data): EnergyMap =>
  mapOf(front(mainsSwitch("S1", first), mainsSwitch("S2", second), mainsLoad(), mainsLoad("LD2")), [
    mains("W1", "X1.L", "F1.1"),
    mains("W2", "F1.2", "S1.1a"),
    mains("W3", "F1.2", "S2.1a"),
    mains("W4", "X1.N", "S1.2a"),
    mains("W5", "X1.N", "S2.2a"),
    mains("W6", "S1.1b", "LD1.L"),
    mains("W7", "S2.1b", "LD2.L"),
    mains("W8", "S1.2b", "LD1.N"),
    mains("W9", "S2.2b", "LD2.N"),
    ...earthing,
  ]);

test("two switches, each for its own load, are each judged", () => {
  const right = answersOf(twoBranches({}, {}));
  expect(right.verdict("all-pole-switch:X1")).toBe("pass");
  expect(right.reasons("all-pole-switch:X1")).toContain("all must be off for the unit to be off");
  const narrow = answersOf(twoBranches({}, { gapMm: 0.5 }));
  expect(narrow.verdict("all-pole-switch:X1")).toBe("fail");
  expect(narrow.reasons("all-pole-switch:X1")).toContain("S2 (Mains switch) opens only 0.5 mm");
  expect(answersOf(twoBranches({ gapMm: null }, {})).verdict("all-pole-switch:X1")).toBe("unknown");
});

test("two single-pole switches in the neutrals are no isolation", () => {
  const map = mapOf(
    front(mainsSwitch("S1", { poles: 1 }), mainsSwitch("S2", { poles: 1 }), mainsLoad(), mainsLoad("LD2")),
    [
      mains("W1", "X1.L", "F1.1"),
      mains("W2", "F1.2", "LD1.L"),
      mains("W3", "F1.2", "LD2.L"),
      mains("W4", "X1.N", "S1.1a"),
      mains("W5", "X1.N", "S2.1a"),
      mains("W6", "S1.1b", "LD1.N"),
      mains("W7", "S2.1b", "LD2.N"),
      ...earthing,
    ],
  );
  const found = answersOf(map);
  expect(found.verdict("all-pole-switch:X1")).toBe("fail");
  expect(found.said("danger")).toContain(
    "S1 (Mains switch) and S2 (Mains switch) break only the neutral of X1 (Inlet).",
  );
});

test("two switches side by side part nothing one at a time", () => {
  const beside = (promise: string) =>
    extended(
      withData(soundBox, "S1", { promise }),
      [mainsSwitch("S2", { promise })],
      [
        mains("Q1", "F1.2", "S2.1a"),
        mains("Q2", "X1.N", "S2.2a"),
        mains("Q3", "S2.1b", "LD1.L"),
        mains("Q4", "S2.2b", "LD1.N"),
      ],
    );
  const found = answersOf(beside("isolation"));
  expect(found.verdict("all-pole-switch:X1")).toBe("fail");
  expect(found.said("danger")).toContain("lie side by side: no single one parts a pole of X1 (Inlet)");
  expect(answersOf(beside("function")).keys).toContain("plug-disconnect:X1");
});

test("a relay is no switch for isolation, and never leaves the inlet unjudged", () => {
  const relay = (promise: string) =>
    answersOf(withData(soundBox, "S1", { actuator: "relay", coilFedBy: "X1", promise }));
  expect(relay("isolation").verdict("all-pole-switch:X1")).toBe("fail");
  expect(relay("function").keys).toContain("plug-disconnect:X1");
  expect(relay("function").keys).not.toContain("all-pole-switch:X1");
});

test("a load before the switch is named, and what the switch does for the others still counts", () => {
  const before = extended(
    soundBox,
    [mainsLoad("LD2")],
    [mains("Q1", "F1.2", "LD2.L"), mains("Q2", "X1.N", "LD2.N")],
  );
  const found = answersOf(before);
  expect(found.keys).toContain("plug-disconnect:X1");
  expect(found.said("caution")).toContain("No hand switch parts LD2 (Mains load) from the mains of X1");
  expect(answersOf(withData(before, "S1", { gapMm: 0.5 })).verdict("all-pole-switch:X1")).toBe("fail");
});

test.each([
  ["x-capacitor", { nanofarads: 470, safetyClass: "none" }],
  ["bleeder", { kilohms: 0.1 }],
  ["indicator", { lamp: "neon", meaning: "output-on", amps: 0.001 }],
] as const)("a %s across an open pole undoes the isolation that a switch promises", (kind, data) => {
  const map = extended(
    soundBox,
    [part(kind, "P9", "Bridge", data)],
    [mains("Q1", "S1.1a", "P9.1"), mains("Q2", "S1.1b", "P9.2")],
  );
  const found = answersOf(map);
  expect(found.verdict("all-pole-switch:X1")).toBe("fail");
  expect(found.said("danger")).toContain(
    "With S1 (Mains switch) off, the line of X1 (Inlet) still comes to LD1 (Mains load) through P9 (Bridge).",
  );
  expect(answersOf(withData(map, "S1", { promise: "unknown" })).verdict("all-pole-switch:X1")).toBe(
    "unknown",
  );
  // The same part between line and neutral, before or behind the switch, does nothing to it.
  for (const [a, b] of [
    ["S1.1a", "S1.2a"],
    ["S1.1b", "S1.2b"],
  ] as const) {
    const across = extended(
      soundBox,
      [part(kind, "P9", "Across", data)],
      [mains("Q1", a, "P9.1"), mains("Q2", b, "P9.2")],
    );
    expect(answersOf(across).verdict("all-pole-switch:X1")).toBe("pass");
  }
});

test("a single-pole switch for function leaves the plug to isolate; one that promises more, or sits in the neutral, fails", () => {
  const keys = (map: EnergyMap) => answersOf(map).keys.filter((key) => /all-pole|plug-disc/.test(key));
  const functional = oneSwitch({ promise: "function" }, "L");
  // IEC 62368-1 Annex L, from memory: an accessible plug may be the disconnect device.
  expect(keys(functional)).toEqual(["plug-disconnect:X1"]);
  const said = answersOf(functional);
  expect(said.said("danger")).toBe("");
  expect(said.said("caution")).toContain("must not be marked as isolating");
  expect(said.said("caution")).toContain(
    "The plug fits both ways round, so with it off, the line may still come to what it switches.",
  );
  expect(keys(oneSwitch({ promise: "function" }, "N", { polarised: "yes" }))).toContain("all-pole-switch:X1");
  for (const promise of ["isolation", "unknown"])
    expect(answersOf(oneSwitch({ promise }, "L")).verdict("all-pole-switch:X1")).toBe("fail");
});

test("loads in series behind a two-pole switch are parted by it", () => {
  const map = extended(
    without(soundBox, "W5"),
    [mainsLoad("LD2")],
    [mains("Q1", "LD1.N", "LD2.L"), mains("Q2", "S1.2b", "LD2.N")],
  );
  // Their current is another question.
  expect(answersOf(map).reasons("all-pole-switch:X1")).toContain(
    "S1 (Mains switch) breaks line and neutral of X1 (Inlet) together",
  );
});

test("a lamp alone on the inlet is judged too", () => {
  const map = mapOf(
    [inlet({ earthPin: "no" }), part("indicator", "H1", "Night light", { lamp: "neon", amps: 0.001 })],
    [mains("W1", "X1.L", "H1.1"), mains("W2", "X1.N", "H1.2")],
  );
  expect(answersOf(map, factsII).keys).toContain("plug-disconnect:X1");
});

test("a supply whose output shares the neutral is parted by the two-pole switch before it", () => {
  const map = extended(
    without(soundBox, "LD1"),
    [directSupply({ insulation: "none" }), part("load", "LD2", "Low load", { supply: "dc", amps: 0.5 })],
    [
      mains("Q1", "S1.1b", "PS1.L"),
      mains("Q2", "S1.2b", "PS1.N"),
      low("Q3", "PS1.+", "LD2.+"),
      low("Q4", "PS1.-", "LD2.-"),
    ],
  );
  expect(answersOf(map).reasons("all-pole-switch:X1")).toContain(
    "S1 (Mains switch) breaks line and neutral of X1 (Inlet) together",
  );
});

test("what is right about a switch that fails is not told as a danger", () => {
  const found = answersOf(withData(soundBox, "S1", { gapMm: 0.5 }));
  expect(found.said("danger")).toBe("S1 (Mains switch) opens only 0.5 mm at each pole; 3 mm is needed.");
  expect(found.said("good")).toContain("rated 250 V and 10 A alternating");
});
