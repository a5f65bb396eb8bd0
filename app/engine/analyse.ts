import type { Analysis } from "./analysis";
import type { EnergyMap } from "./energy-map";
import { mapProblems } from "./problems";
import type { RuleSet } from "./rule-set";
import type { UnitFacts } from "./unit-facts";

export type { Analysis, Statement, StatementFamily, StatementLevel } from "./analysis";
export type { Problem } from "./problem";
export type { UnitFacts } from "./unit-facts";

/** Everything the engine can say of a map by itself. Never throws on a map that fits the schema. */
export function analyse(map: EnergyMap, _ruleSet: RuleSet, facts: UnitFacts): Analysis {
  return {
    problems: mapProblems(map, facts),
    isolation: { sources: [], switches: [], whenOff: [], combinations: [], combinationsComplete: false },
    reverse: { paths: [], falseIndications: [], blockingParts: [] },
    fusing: { conductors: [], devices: [] },
    insulation: { barriers: [] },
    statements: [
      {
        id: "not-computed",
        family: "isolation",
        level: "unknown",
        text: "The engine's computations are not in place yet: nothing is known of this map.",
        elements: [],
        conductors: [],
      },
    ],
  };
}
