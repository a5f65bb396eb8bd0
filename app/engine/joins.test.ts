import { expect, test } from "vitest";

import {
  answersOf,
  battery,
  directSupply,
  earth,
  factsII,
  inverter,
  low,
  mains,
  mainsFuse,
  mainsLoad,
  mainsOutlet,
  mainsSwitch,
  metalCase,
  soundBox,
} from "./box-for-tests";
import { extended, mapOf, part, withData, without, wire } from "./map-builder";
import { starterMaps } from "./starter-maps";

// What mains must not be joined with: earth, what is touched and other circuits, plainly or through a part.

const lamp = (() => {
  const found = starterMaps.find(({ key }) => key === "mains-led-lamp");
  if (found === undefined) throw new Error("there is no lamp");
  return found.map;
})();

test("a sound box has nothing joined and nothing open", () => {
  expect(answersOf(soundBox).notPassed).toEqual([]);
  expect(answersOf(soundBox).analysis.isolation.joins).toEqual([]);
});

test("line on the earth contact of an outlet is a danger", () => {
  const wired = extended(
    soundBox,
    [mainsOutlet()],
    [mains("Q1", "S1.1b", "XO1.L"), mains("Q2", "S1.2b", "XO1.N"), mains("Q3", "S1.1b", "XO1.PE")],
  );
  const found = answersOf(wired);
  expect(found.said("danger")).toContain(
    "With S1 (Mains switch) on, a pole of X1 (Inlet) is joined with the protective earth at XO1 (Mains outlet).",
  );
  expect(found.verdict("circuits-apart")).toBe("fail");
  // In class II too, where no earth terminal is on the map.
  expect(answersOf(without(wired, "PE1", "MP1"), factsII).verdict("circuits-apart")).toBe("fail");
});

test.each(["PS1.PE", "X1.PE"])("neutral on %s is a danger", (terminal) => {
  const map = extended(
    without(soundBox, "PE1", "MP1"),
    [directSupply()],
    [mains("Q1", "S1.1b", "PS1.L"), mains("Q2", "S1.2b", "PS1.N"), mains("Q3", "S1.2b", terminal)],
  );
  expect(answersOf(map).verdict("circuits-apart")).toBe("fail");
});

test("a load, a lamp or a resistor from line to earth is a danger", () => {
  const returned = extended(without(soundBox, "W5"), [], [mains("W5", "LD1.N", "PE1.PE")]);
  expect(answersOf(returned).said("danger")).toContain(
    "a pole of X1 (Inlet) is joined with the protective earth at PE1 (Stud) through LD1 (Mains load).",
  );
  for (const [kind, first, second] of [
    ["indicator", "1", "2"],
    ["bleeder", "1", "2"],
    ["x-capacitor", "1", "2"],
  ] as const) {
    const map = extended(
      soundBox,
      [part(kind, "P9", "Part", {})],
      [mains("Q1", "S1.1b", `P9.${first}`), mains("Q2", `P9.${second}`, "PE1.PE")],
    );
    expect([kind, answersOf(map).verdict("circuits-apart")]).toEqual([kind, "fail"]);
  }
});

test("resistor, capacitor or load from mains to touched metal of class II is a danger", () => {
  const parts = [
    part("bleeder", "P9", "Resistor", { kilohms: 10 }),
    part("x-capacitor", "P9", "Capacitor", { nanofarads: 470, safetyClass: "none" }),
    part("y-capacitor", "P9", "Capacitor", { nanofarads: 100, safetyClass: "none" }),
    part("indicator", "P9", "Lamp", { lamp: "neon", meaning: "other", amps: 0.001 }),
  ];
  for (const each of parts) {
    const map = extended(
      lamp,
      [each],
      [mains("Q1", "S1.1b", "P9.1"), wire("Q2", "P9.2", "MP1.surface", "mains", 0.75, 0.1)],
    );
    const found = answersOf(map, factsII);
    expect(found.said("danger")).toMatch(
      /MP1 \(Metal lamp head\), which can be touched, is live from X1 \(Two-pin plug\) through P9/,
    );
    expect(found.verdict("circuits-apart")).toBe("fail");
  }
});

test("mains through a capacitor or resistor onto extra-low voltage is a danger", () => {
  const bridged = (id: string, data: Record<string, unknown>) =>
    extended(
      lamp,
      [part("y-capacitor", id, "Bridge", { nanofarads: 2.2, ...data })],
      [mains("Q1", "S1.1b", `${id}.1`), low("Q2", `${id}.2`, "PS1.-")],
    );
  const verdict = (data: Record<string, unknown>) =>
    answersOf(bridged("CY9", data), factsII).verdict("circuits-apart");
  expect(verdict({ safetyClass: "none" })).toBe("fail");
  expect(verdict({ safetyClass: "unknown" })).toBe("unknown");
  // One Y2 capacitor is basic insulation only; one Y1, or two Y2 in a row, bridge double insulation (from memory).
  expect(verdict({ safetyClass: "Y2" })).toBe("fail");
  expect(verdict({ safetyClass: "Y1" })).toBe("pass");
  const twice = extended(
    lamp,
    [
      part("y-capacitor", "CY8", "First", { nanofarads: 2.2, safetyClass: "Y2" }),
      part("y-capacitor", "CY9", "Second", { nanofarads: 2.2, safetyClass: "Y2" }),
    ],
    [mains("Q1", "S1.1b", "CY8.1"), mains("Q2", "CY8.2", "CY9.1"), low("Q3", "CY9.2", "PS1.-")],
  );
  expect(answersOf(twice, factsII).verdict("circuits-apart")).toBe("pass");
});

test("a Y2 capacitor to earth is what it is made for", () => {
  const map = extended(
    soundBox,
    [part("y-capacitor", "CY9", "Filter", { nanofarads: 2.2, safetyClass: "Y2" })],
    [mains("Q1", "S1.1b", "CY9.1"), earth("Q2", "CY9.2", "PE1.PE")],
  );
  expect(answersOf(map).verdict("circuits-apart")).toBe("pass");
  expect(answersOf(withData(map, "CY9", { safetyClass: "none" })).verdict("circuits-apart")).toBe("fail");
});

test("a wire past a fuse or a pole is a danger", () => {
  const fuse = extended(soundBox, [], [mains("WB", "F1.1", "F1.2", 1.5)]);
  expect(answersOf(fuse).said("danger")).toContain(
    "WB leads past F1 (Mains fuse), so that it opens nothing.",
  );
  expect(answersOf(fuse).verdict("circuits-apart")).toBe("fail");
  expect(answersOf(fuse).verdict("fuse:F1")).toBe("fail");

  const pole = extended(soundBox, [], [mains("WB", "F1.2", "LD1.L")]);
  expect(answersOf(pole).said("danger")).toContain("W2, WB and W4 lead past S1 (Mains switch)");

  const overSwitch = extended(
    soundBox,
    [mainsSwitch("S9", { poles: 1 })],
    [mains("Q1", "F1.1", "S9.1a"), mains("Q2", "S9.1b", "F1.2")],
  );
  expect(answersOf(overSwitch).said("danger")).toContain(
    "With S9 (Mains switch) on, Q1 and Q2 lead past F1 (Mains fuse)",
  );
});

test("an inverter's neutral joined with earth on purpose is no danger, its line or the plug's neutral is", () => {
  const box = (...bond: [string, string]) =>
    mapOf(
      [
        battery(),
        inverter(),
        mainsFuse(),
        mainsOutlet(),
        mainsSwitch("S2", { poles: 1, promise: "function", dcVolts: 32, dcAmps: 40 }),
        ...metalCase,
      ],
      [
        low("W1", "BT1.+", "S2.1a", 6),
        low("W2", "S2.1b", "U1.in+", 6),
        low("W3", "U1.in-", "BT1.-", 6),
        mains("W4", "U1.L", "F1.1"),
        mains("W5", "F1.2", "XO1.L"),
        mains("W6", "U1.N", "XO1.N"),
        earth("WE1", "XO1.PE", "PE1.PE"),
        earth("WE2", "PE1.PE", "MP1.surface"),
        earth("WNE", ...bond),
      ],
    );
  const bonded = answersOf(box("U1.N", "PE1.PE"));
  expect(bonded.analysis.isolation.joins).toEqual([]);
  expect(bonded.refused.filter((text) => text.includes("protective earth"))).toEqual([]);
  expect(bonded.said("caution")).toContain("The neutral of U1 (Inverter) is joined with protective earth");
  expect(answersOf(box("U1.L", "PE1.PE")).verdict("circuits-apart")).toBe("fail");
  expect(answersOf(box("U1.N", "MP1.surface")).verdict("circuits-apart")).toBe("pass");
  // The neutral of the public supply is not joined with earth inside a unit.
  const inside = extended(soundBox, [], [earth("WNE", "S1.2b", "PE1.PE")]);
  expect(answersOf(inside).verdict("circuits-apart")).toBe("fail");
  // A case that no earth terminal or contact is joined to is live from the neutral.
  const noEarth = without(box("U1.N", "MP1.surface"), "PE1", "WE1", "WE2");
  expect(answersOf(noEarth).verdict("circuits-apart")).toBe("fail");
});

test("a battery's plus on a conductor called earth is refused", () => {
  const map = mapOf(
    [battery(), mainsLoad("LD1", { supply: "dc" })],
    [earth("W1", "BT1.+", "LD1.+", 0.14), low("W2", "LD1.-", "BT1.-")],
  );
  expect(answersOf(map, factsII).refused.join("\n")).toContain(
    "W1 is said to be protective earth, but BT1 (Battery) feeds it from its plus pole.",
  );
});
