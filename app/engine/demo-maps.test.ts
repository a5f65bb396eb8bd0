import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import { demoMaps } from "./demo-maps";
import type { EnergyMap } from "./energy-map";
import { extended, part, withData, without, wire } from "./map-builder";
import { ruleSets, type RuleSet } from "./rule-set";
import { starterMaps } from "./starter-maps";

// The findings that each demo unit is there for, and that the sound ones have none.

const rules: RuleSet = (() => {
  const first = ruleSets[0];
  if (first === undefined) throw new Error("there is no rule set");
  return first;
})();

const factsFor = (map: EnergyMap) => ({
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: map.elements.some(({ kind }) => kind === "earth-terminal")
    ? ("I" as const)
    : ("II" as const),
  cordLengthM: 2,
  cordAreaMm2: 0.75,
});
const look = (map: EnergyMap) => analyse(map, rules, factsFor(map));
const texts = (map: EnergyMap, ...levels: string[]) =>
  look(map)
    .statements.filter(({ level }) => levels.includes(level))
    .map(({ text }) => text);
const sheet = (map: EnergyMap, by = rules) =>
  new Map(deriveBenchSheet(map, by, factsFor(map)).map((check) => [check.key, check]));
const failing = (map: EnergyMap) =>
  [...sheet(map)].filter(([, { computed }]) => computed?.verdict === "fail").map(([key]) => key);
const open = (map: EnergyMap) =>
  [...sheet(map)].filter(([, { computed }]) => computed?.verdict === "unknown").map(([key]) => key);

test.each([
  ...starterMaps.map(({ key, map }) => [key, map] as const),
  ["sound", demoMaps.sound] as const,
  ["soundLamp", demoMaps.soundLamp] as const,
])("%s: the engine finds no fault and leaves nothing open, by either rule set", (_key, map) => {
  expect(texts(map, "danger", "defect", "unknown")).toEqual([]);
  for (const ruleSet of ruleSets) {
    for (const { key, computed } of sheet(map, ruleSet).values())
      expect([key, computed?.verdict ?? "pass"]).toEqual([key, "pass"]);
  }
});

test("a two-pole switch in line and battery plus: what stays live, no double-pole isolation, mains and battery in one body", () => {
  const map = demoMaps.backupSinglePole;
  const said = texts(map, "danger").join("\n");
  expect(said).toContain("S1 (Mains switch) breaks only the line of X1");
  expect(said).toContain("The neutral stays joined: this is not double-pole isolation");
  expect(said).toContain("fits both ways round");
  expect(said).toContain("mains and extra-low voltage in one body (pole 1 mains, pole 2 extra-low voltage)");
  expect(failing(map)).toEqual(["all-pole-switch:X1", "switch-body:S1"]);

  const live = new Map(look(map).isolation.whenOff.map(({ conductor, from }) => [conductor, from]));
  expect([...live.keys()].sort()).toEqual(["W1", "W10", "W11", "W2", "W3", "W4", "W8"]);
  expect(live.get("W3")).toEqual([{ source: "X1", via: [], how: "neutral", certainty: "certain" }]);
  // The wire behind the open line pole hangs on the neutral through the charger.
  expect(live.get("W4")?.[0]?.how).toBe("through-load");
  expect(live.get("W11")).toEqual([
    { source: "BT1", via: ["BM1", "F2"], how: "direct", certainty: "certain" },
  ]);
});

test("the same switch with insulation between poles stated by its maker still isn't double-pole isolation", () => {
  const map = withData(demoMaps.backupSinglePole, "S1", { reinforcedBetweenPoles: "yes" });
  expect(failing(map)).toEqual(["all-pole-switch:X1"]);
});

test("a lamp fed backwards from the battery tells an untruth", () => {
  expect(texts(demoMaps.indicatorBackfed, "defect")).toEqual([
    "H1 (Mains lamp) is lit by BT1 (Battery) alone, although it says that mains is present.",
  ]);
  expect(failing(demoMaps.indicatorBackfed)).toEqual(["lamp-truth:H1"]);
});

test("before the blocking part the lamp is true, and only that part's failure would belie it", () => {
  expect(look(demoMaps.sound).reverse.falseIndications).toEqual([
    { indicator: "H1", meaning: "mains-present", litBy: "BT1", failed: "DI1", certainty: "certain" },
  ]);
});

test("a fuse larger than its wire: which fuse, which wire, how much", () => {
  const said = texts(demoMaps.oversizedFuse, "defect");
  expect(said).toContain(
    "W2 may carry 3 A (the cord table's 0.5 mm²), but F1 (Mains fuse) lets 10 A from X1 (Two-pin plug) through.",
  );
  expect(failing(demoMaps.oversizedFuse)).toEqual(["conductors:X1"]);
  const device = look(demoMaps.oversizedFuse).fusing.devices.find((each) => each.device === "F1");
  expect(device?.proposedAmps).toBe(0.16);
  expect(device?.largestAmps).toBe(2.5);
  // A fuse of 2.5 A suits every wire behind it; the half-square cord before it still hangs on 16 A.
  const smaller = withData(demoMaps.oversizedFuse, "F1", { ratingAmps: 2.5 });
  expect([failing(smaller), open(smaller)]).toEqual([[], ["conductors:X1"]]);
  const plugFuse = withData(smaller, "X1", { upstreamAmps: 3 });
  expect([failing(plugFuse), open(plugFuse)]).toEqual([[], []]);
});

test("a switch in the neutral alone leaves everything live", () => {
  const said = texts(demoMaps.neutralSwitched, "danger").join("\n");
  expect(said).toContain("S1 (Lamp switch) breaks only the neutral of X1");
  expect(said).toContain("With every switch off, W1, W2, W3 and W4 stay live");
});

test("a functional switch in the line of a polarised plug is judged by the plug, not as isolation", () => {
  const map = without(
    withData(withData(demoMaps.backupSinglePole, "X1", { polarised: "yes" }), "S1", {
      promise: "function",
      reinforcedBetweenPoles: "yes",
    }),
  );
  const checks = sheet(map);
  expect(checks.has("all-pole-switch:X1")).toBe(false);
  expect(checks.get("plug-disconnect:X1")?.computed).toBeNull();
  expect(
    sheet(withData(map, "S1", { promise: "unknown" })).get("all-pole-switch:X1")?.computed?.verdict,
  ).toBe("fail");
});

test("contact gap: enough, too small, not known", () => {
  const verdict = (gapMm: number | null) =>
    sheet(withData(demoMaps.sound, "S1", { gapMm })).get("all-pole-switch:X1")?.computed?.verdict;
  expect([verdict(3), verdict(2.9), verdict(null)]).toEqual(["pass", "fail", "unknown"]);
});

test("a switch without a rating for direct current fails where it breaks the battery's 8 A", () => {
  expect(failing(withData(demoMaps.sound, "S2", { dcVolts: 0 }))).toEqual(["switch-body:S2"]);
  expect(open(withData(demoMaps.sound, "S2", { dcVolts: null }))).toEqual(["switch-body:S2"]);
  expect(failing(withData(demoMaps.sound, "S2", { dcAmps: 7.9 }))).toEqual(["switch-body:S2"]);
});

test("a battery that only the charger's fuse stands before is unprotected", () => {
  const report = look(demoMaps.batteryUnfused).fusing;
  const fed = report.conductors.filter(({ source, verdict }) => source === "BT1" && verdict === "fail");
  expect(fed.map(({ conductor }) => conductor)).toContain("W12");
  // The charger limits itself to 5 A, so its own side is right.
  expect(
    report.conductors.filter(({ source }) => source === "CH1").every(({ verdict }) => verdict === "pass"),
  ).toBe(true);
});

test("the lead from the battery to its fuse is short: 180 mm pass, more fails, not known stays open", () => {
  const withLead = (lengthM: number | null): EnergyMap => ({
    ...demoMaps.sound,
    conductors: demoMaps.sound.conductors.map((each) => (each.id === "W10" ? { ...each, lengthM } : each)),
  });
  const verdict = (lengthM: number | null) =>
    sheet(withLead(lengthM)).get("conductors:BT1")?.computed?.verdict;
  // W8 before it is 50 mm.
  expect([verdict(0.13), verdict(0.14), verdict(null)]).toEqual(["pass", "fail", "unknown"]);
});

test("a low-breaking fuse on mains with 287.5 A behind it fails, a high-breaking one passes", () => {
  const lamp = withData(demoMaps.soundLamp, "X1", { prospectiveAmps: 287.5 });
  const low = withData(lamp, "F1", { ratingAmps: 3.15, breakingLetter: "L", breakingAmps: null });
  expect(failing(low)).toEqual(["fuse:F1"]);
  expect(failing(withData(low, "F1", { breakingLetter: "H" }))).toEqual([]);
  expect(open(withData(low, "F1", { breakingLetter: "unknown" }))).toEqual(["fuse:F1"]);
  expect(open(withData(lamp, "X1", { prospectiveAmps: null }))).toEqual(["fuse:F1"]);
});

test("a 32 V blade fuse on a 48 V pack fails, one without a rating for direct current too", () => {
  expect(failing(withData(demoMaps.sound, "BT1", { cellsInSeries: 16 }))).toContain("fuse:F2");
  expect(failing(withData(demoMaps.sound, "F2", { dcVolts: 0 }))).toEqual(["fuse:F2"]);
  expect(open(withData(demoMaps.sound, "F2", { dcVolts: null }))).toEqual(["fuse:F2"]);
});

test("a converter that may conduct backwards can't be excluded, one said not to passes, one said to fails", () => {
  const verdict = (conductsBackwards: string) => {
    const checks = sheet(withData(demoMaps.converterUnknown, "CH1", { conductsBackwards }));
    return [checks.get("backfeed:BT1:J1")?.computed?.verdict, checks.get("lamp-truth:H1")?.computed?.verdict];
  };
  expect(verdict("unknown")).toEqual(["unknown", "unknown"]);
  expect(verdict("no")).toEqual(["pass", "pass"]);
  expect(verdict("yes")).toEqual(["fail", "fail"]);
});

test("earth through a fuse is a danger and the case counts as not bonded", () => {
  expect(texts(demoMaps.earthFused, "danger").join("\n")).toContain(
    "MP1 (Metal case) is joined to earth only through F3",
  );
  expect(failing(demoMaps.earthFused)).toContain("earth-path");
});

test("an inverter behind one relay: welded, it makes the plug pins live; off does not end its voltage", () => {
  const paths = look(demoMaps.inverterStation).reverse.paths;
  expect(paths.map(({ from, to, failed, certainty }) => [from, to, failed, certainty])).toEqual([
    ["BT1", "X1", "K1", "certain"],
  ]);
  expect(failing(demoMaps.inverterStation)).toEqual(["inverter-off:BT1", "backfeed:BT1:X1"]);
});

test("a relay whose coil is fed by nobody knows what leaves the plug pins open", () => {
  const map = withData(demoMaps.inverterStation, "K1", { coilFedBy: null });
  // A changeover contact alone never joins both sides, whatever its coil does.
  expect(look(map).reverse.paths.filter(({ failed }) => failed === null)).toEqual([]);
});

test("two sources on a bus with one diode each: no way healthy, one way for each diode failed", () => {
  const bus = extended(
    without(demoMaps.converterUnknown, "CH1", "H1", "F2"),
    [
      part("diode", "D1", "Adapter diode", {
        ratedAmps: 5,
        reverseVolts: 40,
        forwardVolts: 0.5,
        leakageMicroamps: 100,
      }),
      part("diode", "D2", "Battery diode", {
        ratedAmps: 5,
        reverseVolts: 40,
        forwardVolts: 0.5,
        leakageMicroamps: 100,
      }),
    ],
    [
      wire("N1", "F1.2", "D1.A", "elv", 0.75, 0.1),
      wire("N2", "D1.K", "S1.1a", "elv", 0.75, 0.1),
      wire("N3", "BM1.P+", "D2.A", "elv", 0.75, 0.1),
      wire("N4", "D2.K", "S1.1a", "elv", 0.75, 0.1),
      wire("N5", "J1.-", "BM1.P-", "elv", 0.75, 0.1),
    ],
  );
  const ways = look(bus).reverse.paths.map(
    ({ from, to, via, failed }) => `${from}>${via.join(">")}>${to} failed ${failed ?? "none"}`,
  );
  expect(ways.sort()).toEqual(["BT1>BM1>D2>D1>F1>J1 failed D1", "J1>F1>D1>D2>BM1>BT1 failed D2"]);
});

test("mains joined with the output, a short and a live case are dangers in the positions that make them", () => {
  const joined = extended(demoMaps.sound, [], [wire("Z1", "S1.1b", "XO1.+", "mains", 0.75, 0.1)]);
  expect(texts(joined, "danger").join("\n")).toMatch(
    /mains from X1 \(Appliance inlet\) is joined with the extra-low voltage of BT1/,
  );
  expect(failing(joined)).toContain("circuits-apart");

  const shorted = extended(
    demoMaps.sound,
    [part("switch", "S9", "Wrong", { poles: 1 })],
    [wire("Z1", "F2.2", "S9.1a", "elv", 1, 0.1), wire("Z2", "S9.1b", "BM1.P-", "elv", 1, 0.1)],
  );
  const short = look(shorted).isolation.joins.find(
    ({ kind, source }) => kind === "short" && source === "BT1",
  );
  expect(short?.switchesOn).toEqual(["S9"]);

  const live = extended(demoMaps.soundLamp, [], [wire("Z1", "S1.1b", "MP1.surface", "mains", 0.75, 0.1)]);
  expect(look(live).isolation.joins.map(({ kind, switchesOn }) => [kind, switchesOn])).toContainEqual([
    "live-part",
    ["S1"],
  ]);
});

test("a conductor said to be extra-low voltage that mains reaches is refused", () => {
  const wrong: EnergyMap = {
    ...demoMaps.sound,
    conductors: demoMaps.sound.conductors.map((each) =>
      each.id === "W4" ? { ...each, circuit: "elv" as const } : each,
    ),
  };
  expect(
    look(wrong)
      .problems.filter(({ blocking }) => blocking)
      .map(({ text }) => text),
  ).toEqual(["W4 is said to be extra-low voltage, but mains from X1 (Appliance inlet) reaches it."]);
});

test("the charger's set-point, current and the protection board are held against the battery", () => {
  expect(failing(withData(demoMaps.sound, "CH1", { setPointVolts: 14.7 }))).toEqual(["battery-state:BT1"]);
  expect(failing(withData(demoMaps.sound, "BT1", { maxChargeAmps: 4 }))).toEqual(["battery-state:BT1"]);
  expect(open(withData(demoMaps.sound, "CH1", { setPointVolts: null }))).toContain("battery-state:BT1");
  const bare = extended(
    without(demoMaps.sound, "BM1"),
    [],
    [
      wire("W10", "BT1.+", "F2.1", "elv", 2.5, 0.1),
      wire("W13", "BT1.-", "XO1.-", "elv", 2.5, 0.3),
      wire("W14", "CH1.-", "BT1.-", "elv", 1.5, 0.2),
    ],
  );
  expect(failing(bare)).toEqual(["battery-state:BT1"]);
});

test("insulation that its maker calls basic fails between mains and what people touch", () => {
  expect(failing(withData(demoMaps.sound, "CH1", { insulation: "basic" }))).toEqual([
    "insulation-barrier:CH1",
  ]);
  expect(open(withData(demoMaps.sound, "CH1", { insulation: "unknown" }))).toContain(
    "insulation-barrier:CH1",
  );
  expect(failing(withData(demoMaps.sound, "MP1", { clearanceMm: 1.4 }))).toEqual([
    "insulation-clearance:MP1",
  ]);
  expect(failing(withData(demoMaps.soundLamp, "MP1", { clearanceMm: 2.8 }))).toEqual([
    "insulation-barrier:MP1",
  ]);
});

test.each([
  // What is forgotten of the sound back-up box, and the checks that can then no longer pass.
  ["F1", { ratingAmps: null }, ["fuse:F1", "conductors:X1"]],
  ["F2", { ratingAmps: null }, ["fuse:F2", "conductors:BT1"]],
  ["X1", { upstreamAmps: null }, ["conductors:X1"]],
  ["X1", { prospectiveAmps: null }, ["fuse:F1"]],
  ["CH1", { inputAmps: null }, ["fuse:F1", "switch-body:S1", "all-pole-switch:X1"]],
  ["CH1", { outputAmps: null }, ["conductors:CH1", "battery-state:BT1"]],
  ["CH1", { leakageMilliamps: null }, ["earth-current:X1"]],
  ["BT1", { internalMilliohms: null }, ["fuse:F2"]],
  ["BT1", { cellsInSeries: null }, ["fuse:F2", "battery-state:BT1", "switch-body:S2"]],
  ["XO1", { maxAmps: null }, ["fuse:F2", "switch-body:S2"]],
  ["S1", { acVolts: null }, ["switch-body:S1", "all-pole-switch:X1"]],
  ["DI1", { blocksReverse: "unknown" }, ["lamp-truth:H1"]],
  ["H1", { meaning: "unknown" }, ["lamp-truth:H1"]],
  ["MP1", { creepageMm: null }, ["insulation-clearance:MP1"]],
] as const)("not knowing %s %j leaves open %j", (id, data, expected) => {
  const checks = sheet(withData(demoMaps.sound, id, data));
  for (const key of expected) {
    expect([key, checks.get(key)?.computed?.verdict]).toEqual([key, "unknown"]);
  }
});

test("not knowing a cross-section leaves every source that feeds it open", () => {
  const map: EnergyMap = {
    ...demoMaps.sound,
    conductors: demoMaps.sound.conductors.map((each) => (each.id === "W12" ? { ...each, area: null } : each)),
  };
  expect(open(map)).toEqual(["conductors:CH1", "conductors:BT1"]);
});

test("a cord behind more than 16 A is not shown to be protected in a short circuit", () => {
  expect(open(withData(demoMaps.sound, "X1", { upstreamAmps: 20 }))).toEqual(["conductors:X1"]);
});

test.each(["switch", "breaker", "thermal-cutout"] as const)(
  "a %s in the earth lead is never let pass",
  (kind) => {
    const ends = kind === "thermal-cutout" ? ["1", "2"] : ["1a", "1b"];
    const map = extended(
      without(demoMaps.sound, "WE2"),
      [part(kind, "Z1", "in the earth lead")],
      [
        wire("WE2", "PE1.PE", `Z1.${ends[0]}`, "earth", 1.5, 0.1),
        wire("WE4", `Z1.${ends[1]}`, "MP1.surface", "earth", 1.5, 0.1),
      ],
    );
    expect(failing(map)).toContain("earth-path");
    expect(texts(map, "danger").join("\n")).toContain(
      "Z1 (in the earth lead) sits in the protective conductor",
    );
  },
);

test("one switch in each pole is not both poles together", () => {
  const map = extended(
    without(withData(demoMaps.soundLamp, "S1", { poles: 1 }), "W3", "W5"),
    [
      part("switch", "S2", "Neutral switch", {
        promise: "isolation",
        gapMm: 3,
        acVolts: 250,
        acAmps: 6,
        dcVolts: 0,
        dcAmps: 0,
      }),
    ],
    [wire("W3", "X1.N", "S2.1a", "mains", 0.75, 1.9), wire("W5", "S2.1b", "PS1.N", "mains", 0.75, 0.1)],
  );
  expect(look(map).isolation.sources[0]).toMatchObject({
    poles: [
      { pole: "L", brokenBy: ["S1"], partedWhenAllOff: true },
      { pole: "N", brokenBy: ["S2"], partedWhenAllOff: true },
    ],
    allPoleSwitches: [],
  });
  expect(failing(map)).toEqual(["all-pole-switch:X1"]);
  expect(texts(map, "danger").join("\n")).toContain("broken by different switches");
});

test("two two-pole switches in series: either of them will do", () => {
  const map = extended(
    without(demoMaps.soundLamp, "W4", "W5"),
    [
      part("switch", "S2", "Second switch", {
        poles: 2,
        promise: "isolation",
        gapMm: 1,
        acVolts: 250,
        acAmps: 6,
        dcVolts: 0,
        dcAmps: 0,
      }),
    ],
    [
      wire("W4", "S1.1b", "S2.1a", "mains", 0.75, 0.1),
      wire("W5", "S1.2b", "S2.2a", "mains", 0.75, 0.1),
      wire("W8", "S2.1b", "PS1.L", "mains", 0.75, 0.1),
      wire("W9", "S2.2b", "PS1.N", "mains", 0.75, 0.1),
    ],
  );
  expect(look(map).isolation.sources[0]?.allPoleSwitches).toEqual(["S1", "S2"]);
  expect(failing(map)).toEqual([]);
});

test("a backfeed relay that drops out with the mains keeps the pins dead; nobody knowing its coil leaves that open", () => {
  const map = extended(
    without(withData(demoMaps.inverterStation, "K1", { throw: "single" }), "W6", "W7", "W8", "W9"),
    [],
    [
      wire("W6", "K1.1b", "XO1.L", "mains", 0.75, 0.2),
      wire("W7", "K1.2b", "XO1.N", "mains", 0.75, 0.2),
      wire("W8", "U1.L", "XO1.L", "mains", 0.75, 0.2),
      wire("W9", "U1.N", "XO1.N", "mains", 0.75, 0.2),
    ],
  );
  const told = (each: EnergyMap) =>
    look(each)
      .reverse.paths.filter(({ from, to }) => from === "BT1" && to === "X1")
      .map(({ failed, certainty }) => [failed, certainty]);
  expect(told(map)).toEqual([["K1", "certain"]]);
  const verdict = (coilFedBy: string | null) =>
    sheet(withData(map, "K1", { coilFedBy })).get("backfeed:BT1:X1")?.computed?.verdict;
  expect(told(withData(map, "K1", { coilFedBy: null }))).toContainEqual([null, "possible"]);
  expect([verdict("X1"), verdict(null), verdict("BT1")]).toEqual(["fail", "unknown", "fail"]);
});
