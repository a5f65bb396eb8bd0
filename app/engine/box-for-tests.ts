import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import type { Element, EnergyMap } from "./energy-map";
import { mapOf, part, wire } from "./map-builder";
import { ruleSets } from "./rule-set";
import { submissionProblems } from "./submission";
import type { UnitFacts } from "./unit-facts";

/** Parts of a small mains unit, sound by themselves, and the engine's answers about a map, for the tests. */

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");

export const factsI: UnitFacts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
};
export const factsII: UnitFacts = { ...factsI, protectionClass: "II" };

type Data = Record<string, unknown>;

export const inlet = (data: Data = {}): Element =>
  part("mains-inlet", "X1", "Inlet", {
    earthPin: "yes",
    polarised: "no",
    upstreamAmps: 16,
    prospectiveAmps: 300,
    ...data,
  });
export const mainsFuse = (data: Data = {}): Element =>
  part("fuse", "F1", "Mains fuse", {
    standard: "iec-60127",
    speed: "T",
    breakingLetter: "H",
    breakingAmps: 1500,
    acVolts: 250,
    dcVolts: 0,
    ratingAmps: 2,
    ...data,
  });
export const mainsSwitch = (id = "S1", data: Data = {}): Element =>
  part("switch", id, "Mains switch", {
    poles: 2,
    promise: "isolation",
    gapMm: 3,
    acVolts: 250,
    acAmps: 10,
    dcVolts: 0,
    dcAmps: 0,
    reinforcedBetweenPoles: "yes",
    ...data,
  });
export const mainsLoad = (id = "LD1", data: Data = {}): Element =>
  part("load", id, "Mains load", { supply: "mains", amps: 1, heating: "no", ...data });
export const mainsOutlet = (data: Data = {}): Element =>
  part("outlet", "XO1", "Mains outlet", { supply: "mains", maxAmps: 1, touchable: "no", ...data });
export const directSupply = (data: Data = {}): Element =>
  part("isolated-supply", "PS1", "Supply", {
    insulation: "reinforced",
    inputAmps: 0.5,
    outputVolts: 24,
    outputAmps: 1,
    conductsBackwards: "no",
    leakageMilliamps: 0,
    ...data,
  });
export const battery = (data: Data = {}): Element =>
  part("battery", "BT1", "Battery", {
    chemistry: "lead-acid",
    cellsInSeries: 6,
    stringsInParallel: 1,
    capacityAh: 20,
    internalMilliohms: 30,
    maxDischargeAmps: 40,
    maxChargeAmps: 5,
    ...data,
  });
export const inverter = (data: Data = {}): Element =>
  part("converter", "U1", "Inverter", {
    output: "mains",
    insulation: "reinforced",
    inputAmps: 20,
    outputVolts: 230,
    outputAmps: 1,
    conductsBackwards: "no",
    ...data,
  });

export const mains = (id: string, from: string, to: string, mm2: number | null = 0.75) =>
  wire(id, from, to, "mains", mm2, 0.2);
export const low = (id: string, from: string, to: string, mm2 = 0.75) => wire(id, from, to, "elv", mm2, 0.2);
export const earth = (id: string, from: string, to: string, mm2: number | null = 1.5) =>
  wire(id, from, to, "earth", mm2, 0.2);

export const metalCase: Element[] = [
  part("earth-terminal", "PE1", "Stud", { lockedFixing: "yes" }),
  part("accessible-part", "MP1", "Case", { clearanceMm: 6, creepageMm: 8, reinforcedFromMains: "no" }),
];
export const earthing = [earth("WE1", "X1.PE", "PE1.PE"), earth("WE2", "PE1.PE", "MP1.surface")];

/** Inlet, fuse, two-pole switch, one load and an earthed case, all right. */
export const soundBox: EnergyMap = mapOf(
  [inlet(), mainsFuse(), mainsSwitch(), mainsLoad(), ...metalCase],
  [
    mains("W1", "X1.L", "F1.1"),
    mains("W2", "F1.2", "S1.1a"),
    mains("W3", "X1.N", "S1.2a"),
    mains("W4", "S1.1b", "LD1.L"),
    mains("W5", "S1.2b", "LD1.N"),
    ...earthing,
  ],
);

/** What the engine says of a map: verdicts by check, statements by level, reasons for refusal. */
export function answersOf(map: EnergyMap, facts: UnitFacts = factsI, ruleSet = rules) {
  if (ruleSet === undefined) throw new Error("there is no rule set");
  const analysis = analyse(map, ruleSet, facts);
  const sheet = deriveBenchSheet(map, ruleSet, facts);
  const check = (key: string) => sheet.find((each) => each.key === key);
  return {
    analysis,
    keys: sheet.map(({ key }) => key),
    verdict: (key: string) => check(key)?.computed?.verdict ?? null,
    reasons: (key: string) => (check(key)?.computed?.reasons ?? []).map(({ text }) => text).join("\n"),
    said: (...levels: string[]) =>
      analysis.statements
        .filter(({ level }) => levels.includes(level))
        .map(({ text }) => text)
        .join("\n"),
    notPassed: sheet
      .filter(({ computed }) => computed !== null && computed.verdict !== "pass")
      .map(({ key, computed }) => `${key} ${computed?.verdict ?? ""}`),
    refused: submissionProblems(map, facts).map(({ text }) => text),
  };
}
