import type { Analysis } from "./analysis";
import { circuitOf } from "./circuit";
import type { EnergyMap } from "./energy-map";
import { analyseFusing } from "./fusing";
import { analyseInsulation } from "./insulation";
import { analyseIsolation } from "./isolation";
import { viewOf } from "./map-view";
import { ratingFindings } from "./part-ratings";
import { mapProblems } from "./problems";
import { analyseReverse } from "./reverse";
import type { RuleSet } from "./rule-set";
import { statementsOf } from "./statements";
import { touchFindings } from "./touch-voltage";
import type { UnitFacts } from "./unit-facts";

export type { Analysis, Statement, StatementFamily, StatementLevel } from "./analysis";
export type { Problem } from "./problem";
export type { UnitFacts } from "./unit-facts";

/** Everything the engine can say of a map by itself. Never throws on a map that fits the schema. */
export function analyse(map: EnergyMap, ruleSet: RuleSet, facts: UnitFacts): Analysis {
  const circuit = circuitOf(viewOf(map));
  const results = {
    isolation: analyseIsolation(circuit),
    reverse: analyseReverse(circuit),
    fusing: analyseFusing(circuit, facts),
    insulation: analyseInsulation(circuit, ruleSet, facts),
    parts: [...touchFindings(circuit, facts), ...ratingFindings(circuit, facts)],
  };
  return {
    problems: mapProblems(map, facts),
    ...results,
    statements: statementsOf(circuit, results, ruleSet, facts),
  };
}
