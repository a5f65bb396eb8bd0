import { europeanAfterRepair } from "./rule-sets/european-after-repair";
import { ukInService } from "./rule-sets/uk-in-service";

/**
 * Where a value comes from. `mark` says how sure we are: V a public page says so, M from memory and to be checked
 * against the workshop's own copy, C computed from a stated formula.
 */
export interface Citation {
  standard: string;
  clause: string;
  edition: string;
  mark: "V" | "M" | "C";
  note?: string;
}

export interface RuleValue {
  value: number;
  unit: string;
  citation: Citation;
}

/** The limit of the protective-earth resistance: two published ways to get it. */
export type ProtectiveEarthRule =
  | {
      /** A base up to some cord length, a step for each started further stretch, and a cap. */
      kind: "stepped";
      base: RuleValue;
      baseLength: RuleValue;
      step: RuleValue;
      stepLength: RuleValue;
      cap: RuleValue;
      /** The steps hold for cords up to this area; above it the resistance is computed, */
      largestArea: RuleValue;
      /** and the limit is never below this. */
      floor: RuleValue;
    }
  | {
      /** An allowance above the cord's own resistance. */
      kind: "above-cord";
      allowance: RuleValue;
    };

/** Limit of the protective conductor current of heating appliances, by their power. */
export interface PerKilowattRule {
  kind: "per-kilowatt";
  /** Applies above this power; the ordinary limit holds up to it. */
  above: RuleValue;
  perKilowatt: RuleValue;
  /** Never below this. */
  least: RuleValue;
  cap: RuleValue;
}

/** One profile of test limits. A verdict never takes limits from two of them. */
export interface RuleSet {
  key: string;
  version: string;
  title: string;
  region: string;
  notes: string[];
  values: {
    protectiveEarth: ProtectiveEarthRule;
    protectiveEarthTestAmps: RuleValue;
    insulationTestVolts: RuleValue;
    /** Used instead where surge suppressors would upset the test. */
    insulationReducedTestVolts: RuleValue;
    insulationClassI: RuleValue;
    insulationClassIHeating: RuleValue;
    insulationClassII: RuleValue;
    insulationMainsToElv: RuleValue;
    protectiveConductorCurrent: RuleValue;
    protectiveConductorCurrentHandheld: RuleValue;
    protectiveConductorCurrentHeating: PerKilowattRule;
    touchCurrent: RuleValue;
    contactGap: RuleValue;
    residualVolts: RuleValue;
    residualSeconds: RuleValue;
    /** Below this summed capacitance no discharge test is called for. */
    residualExemptNanofarads: RuleValue;
    backfeedSeconds: RuleValue;
    backfeedAcVolts: RuleValue;
    backfeedDcVolts: RuleValue;
    pollutionDegree: RuleValue;
    altitude: RuleValue;
  };
}

export const ruleSets: RuleSet[] = [europeanAfterRepair, ukInService];

/** The rule set with that key and version, or `undefined`: a record pins both. */
export function findRuleSet(key: string, version: string): RuleSet | undefined {
  return ruleSets.find((each) => each.key === key && each.version === version);
}

/** Every value of a rule set with the name it has in the data, for tables on screen and in the record. */
export function listRuleValues(ruleSet: RuleSet): { name: string; value: RuleValue }[] {
  return Object.entries(ruleSet.values).flatMap(([name, entry]) =>
    "kind" in entry
      ? Object.entries(entry).flatMap(([part, value]) =>
          typeof value === "string" ? [] : [{ name: `${name}.${part}`, value }],
        )
      : [{ name, value: entry }],
  );
}
