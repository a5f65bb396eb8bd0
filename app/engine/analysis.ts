import type { Problem } from "./problem";

/** What the engine found out about a map. Plain data: it can be stored, sent and compared. */

export type StatementFamily =
  | "isolation"
  | "reverse"
  | "fusing"
  | "insulation"
  | "protective-earth"
  | "leakage"
  | "stored-charge"
  | "battery";
export type StatementLevel = "danger" | "defect" | "caution" | "good" | "unknown";

export interface Statement {
  /** Stable for the same finding about the same things. */
  id: string;
  family: StatementFamily;
  level: StatementLevel;
  text: string;
  elements: string[];
  conductors: string[];
}

/** Sure from what is known, or not to be excluded because something is not known. */
export type Certainty = "certain" | "possible";

export interface LiveFrom {
  /** Id of the source element. */
  source: string;
  /** Elements that the energy passes on its way here, in order, without the source. */
  via: string[];
  /** Reached on its line/plus pole, or only on its neutral/minus pole, or through a load. */
  how: "direct" | "neutral" | "through-load";
  certainty: Certainty;
}

export interface LiveConductor {
  conductor: string;
  from: LiveFrom[];
}

export interface PoleReport {
  /** "L", "N", "+" or "-". */
  pole: string;
  /** Each switch that by itself parts this pole from everything that uses energy. */
  brokenBy: string[];
  /** With all switches off it is parted. `null`: not known. */
  partedWhenAllOff: boolean | null;
}

export interface ConsumerPole {
  pole: "L" | "N";
  /** It comes to the consumer with everything switched on, over another consumer in series too. */
  inUse: boolean;
  /** Each switch that by itself parts it from this consumer. */
  brokenBy: string[];
  /** Parts over which it still comes to the consumer although that switch is off. */
  past: { switch: string; through: string[] }[];
  /** Parted with all hand switches off, whatever relays do. */
  partedByHand: boolean;
}

export interface ConsumerIsolation {
  consumer: string;
  poles: ConsumerPole[];
}

export interface SourceIsolation {
  source: string;
  poles: PoleReport[];
  /** Of a mains inlet, what it feeds without anything between that makes another circuit of it. */
  consumers: ConsumerIsolation[];
  /** Switches that part all poles of this source together in one body. */
  allPoleSwitches: string[];
}

export interface SwitchReport {
  element: string;
  poles: { pole: number; circuits: ("mains" | "elv" | "earth")[] }[];
  mixesMainsAndElv: boolean;
  /** A pole carries the protective conductor. */
  switchesEarth: boolean;
}

export interface SwitchCombination {
  /** State of each switch by id. */
  states: Record<string, "on" | "off">;
  /** Conductors that carry a live potential, sure or not, by source. */
  live: Record<string, string[]>;
  /** How many combinations come to the same; the states are those of the one with fewest switches on. */
  alike: number;
}

/** Two things that must not be joined and are, in some position of the switches. */
export interface Join {
  id: string;
  kind: "short" | "mains-to-elv" | "live-part" | "live-earth" | "bridged";
  /** The source that is shorted or reaches where it must not. */
  source: string;
  /** What it reaches: an element, or the other source. */
  other: string;
  /** Loads, lamps, resistors and capacitors that it reaches it through; empty for a plain joint. */
  through: string[];
  /** In the simplest case; the other switches are off. */
  switchesOn: string[];
  conductors: string[];
  certainty: Certainty;
}

export interface IsolationResult {
  sources: SourceIsolation[];
  switches: SwitchReport[];
  /** With every switch off. */
  whenOff: LiveConductor[];
  /** Every different outcome. With more than six switches only some combinations are worked out. */
  combinations: SwitchCombination[];
  /** In any position of the switches; complete while there are at most six changeovers. */
  joins: Join[];
  joinsComplete: boolean;
  combinationsComplete: boolean;
}

export interface BackwardPath {
  id: string;
  /** The source that drives it. */
  from: string;
  /** The element it reaches: another source or the pins of an inlet. */
  to: string;
  /** Elements passed, in order, without the ends. */
  via: string[];
  conductors: string[];
  /** `null` in the healthy unit; else the one part that has failed short. */
  failed: string | null;
  certainty: Certainty;
  /** Which of its poles it reaches the other with; one alone counts at the pins of a mains plug only. */
  poles: "both" | "live" | "neutral";
  /** Parts along the way whose data would be needed to exclude it. */
  unknownParts: string[];
}

export interface FalseIndication {
  indicator: string;
  meaning: string;
  /** The source that lights it although what it means is absent. */
  litBy: string;
  failed: string | null;
  certainty: Certainty;
}

export interface ReverseResult {
  paths: BackwardPath[];
  falseIndications: FalseIndication[];
  /** The parts that were each taken as failed short. */
  blockingParts: string[];
  /** Changeovers of which not every position was worked out: where nothing was found, nothing is known. Empty when all were. */
  unchecked: string[];
}

export type Verdict3 = "pass" | "fail" | "unknown";

export interface ConductorProtection {
  conductor: string;
  source: string;
  /** Largest current that can flow on without any device opening, A; `null`: nothing limits it or not known. */
  limitAmps: number | null;
  /** The devices or current limits that set it. */
  limitedBy: string[];
  /** What the conductor may carry, A; `null`: not known. */
  ampacityAmps: number | null;
  verdict: Verdict3;
  text: string;
}

export interface DeviceReport {
  device: string;
  source: string;
  loadAmps: number | null;
  ratingAmps: number | null;
  /** Smallest current that the conductors it protects may carry, A. */
  smallestAmpacityAmps: number | null;
  /** The next standard rating that would suit, A; `null`: none or not known. */
  proposedAmps: number | null;
  /** The largest standard rating that its conductors allow, A. */
  largestAmps: number | null;
  prospectiveAmps: number | null;
  breakingAmps: number | null;
  loadVerdict: Verdict3;
  breakingVerdict: Verdict3;
  voltageVerdict: Verdict3;
  /** It sits in a pole where opening makes dead what is behind it. */
  placementVerdict: Verdict3;
  texts: string[];
}

export interface ContactReport {
  switch: string;
  source: string;
  loadAmps: number | null;
  verdict: Verdict3;
  text: string;
}

export interface FusingResult {
  conductors: ConductorProtection[];
  devices: DeviceReport[];
  contacts: ContactReport[];
  /** Changeovers of which not every position was worked out; what would pass is then not known. Empty when all were. */
  unchecked: string[];
}

export interface InsulationBarrier {
  id: string;
  /** Between which two circuits, in words. */
  between: string;
  elements: string[];
  grade: "basic" | "reinforced";
  /** `null` outside the tables. */
  clearanceMm: number | null;
  creepageMm: number | null;
  minimumMegohms: number;
  testVolts: number;
  verdict: Verdict3;
  text: string;
}

export interface InsulationResult {
  barriers: InsulationBarrier[];
}

/** Something found about one part by itself: a voltage where it is touched, or a rating against what it carries. */
export interface PartFinding {
  kind: "touch" | "rating";
  element: string;
  verdict: Verdict3;
  text: string;
  elements: string[];
  conductors: string[];
}

export interface Analysis {
  problems: Problem[];
  isolation: IsolationResult;
  reverse: ReverseResult;
  fusing: FusingResult;
  insulation: InsulationResult;
  /** Touched contacts and parts above the limit, and parts whose ratings don't suit or aren't known; those that suit are left out. */
  parts: PartFinding[];
  statements: Statement[];
}
