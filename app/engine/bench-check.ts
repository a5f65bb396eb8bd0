import type { Citation, RuleSet } from "./rule-set";
import type { MapView } from "./map-view";
import type { UnitFacts } from "./unit-facts";
import type { Analysis } from "./analysis";

export const checkFamilies = [
  "visual",
  "protective-earth",
  "insulation",
  "fusing",
  "double-pole-isolation",
  "reverse-current",
  "leakage",
  "stored-charge",
  "battery",
  "heat",
  "marking",
  "function",
] as const;
export type CheckFamily = (typeof checkFamilies)[number];

/** The families in words, the same on screen and in a printed record. */
export const familyTitles: Record<CheckFamily, string> = {
  visual: "Visual and mechanical",
  "protective-earth": "Protective earth",
  insulation: "Insulation",
  fusing: "Fusing",
  "double-pole-isolation": "Double-pole isolation",
  "reverse-current": "Reverse current",
  leakage: "Leakage",
  "stored-charge": "Stored charge",
  battery: "Battery",
  heat: "Heat",
  marking: "Marking",
  function: "Function",
};

export const instrumentKinds = [
  "low-ohm-meter",
  "insulation-tester",
  "leakage-meter",
  "multimeter",
  "clamp-meter",
  "oscilloscope",
  "caliper",
  "thermometer",
] as const;
export type InstrumentKind = (typeof instrumentKinds)[number];

export type Limit =
  | { kind: "at-most" | "at-least"; value: number; unit: string; citation: Citation }
  | { kind: "between"; lower: number; upper: number; unit: string; citation: Citation };

export interface Reason {
  text: string;
  elements: string[];
  conductors: string[];
}

export interface ComputedAnswer {
  verdict: "pass" | "fail" | "unknown";
  reasons: Reason[];
}

export type Ask =
  | {
      kind: "reading";
      quantity: string;
      unit: string;
      limit: Limit;
      instrument: { kind: InstrumentKind; range: string };
      conditions: string[];
    }
  | { kind: "examination"; question: string; conforms: string; doesNot: string };

/** One step of a bench sheet. Plain data, so that it can be stored with the record. */
export interface BenchCheck {
  /** Stable across revisions: the check's id and the ids of what it is about. */
  key: string;
  family: CheckFamily;
  title: string;
  why: Reason[];
  method: string[];
  cautions: string[];
  /** Done with mains connected, or with what an inverter makes of it: only after the dead checks have passed. */
  energised?: boolean;
  /** The engine's own answer, or `null` where only the bench can tell. */
  computed: ComputedAnswer | null;
  asks: Ask;
  photo: "required" | "optional" | "none";
  citations: Citation[];
  subjects: { elements: string[]; conductors: string[] };
}

export interface CheckDefinition {
  id: string;
  family: CheckFamily;
  derive(view: MapView, ruleSet: RuleSet, facts: UnitFacts, analysis: Analysis): BenchCheck[];
}
