import type { Statement, StatementLevel } from "./analysis";
import type { Circuit } from "./circuit";
import { earthStatements, isolationStatements, joinStatement } from "./isolation-statements";
import { reverseStatements } from "./reverse-statements";
import type { RuleSet } from "./rule-set";
import type { Results } from "./statement-parts";
import {
  batteryStatements,
  chargeStatements,
  fusingStatements,
  insulationStatements,
  leakageStatements,
  partStatements,
} from "./supply-statements";
import type { UnitFacts } from "./unit-facts";

/** The engine's findings as sentences, worst first, for the builder while editing and for the reviewer. */
export function statementsOf(
  circuit: Circuit,
  analysis: Results,
  ruleSet: RuleSet,
  facts: UnitFacts,
): Statement[] {
  const all = [
    ...analysis.isolation.joins.map((join) => joinStatement(circuit, join)),
    ...isolationStatements(circuit, analysis, ruleSet),
    ...earthStatements(circuit, facts),
    ...reverseStatements(circuit, analysis),
    ...fusingStatements(circuit, analysis),
    ...partStatements(analysis),
    ...insulationStatements(analysis),
    ...leakageStatements(circuit, ruleSet, facts),
    ...chargeStatements(circuit, ruleSet, facts),
    ...batteryStatements(circuit),
  ];
  return all.sort((a, b) => levels.indexOf(a.level) - levels.indexOf(b.level));
}

const levels: StatementLevel[] = ["danger", "defect", "unknown", "caution", "good"];
