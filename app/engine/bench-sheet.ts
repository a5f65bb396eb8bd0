import { analyse } from "./analyse";
import type { Analysis } from "./analysis";
import type { BenchCheck } from "./bench-check";
import { checkRegistry } from "./check-registry";
import type { EnergyMap } from "./energy-map";
import { viewOf } from "./map-view";
import type { RuleSet } from "./rule-set";
import type { UnitFacts } from "./unit-facts";

export type { BenchCheck, CheckFamily, InstrumentKind, Limit, Reason } from "./bench-check";

/**
 * The checks that this map and this rule set call for, in working order: whatever needs mains connected comes after all
 * that is done with the plug pulled. An analysis made already may be passed in.
 */
export function deriveBenchSheet(
  map: EnergyMap,
  ruleSet: RuleSet,
  facts: UnitFacts,
  analysis?: Analysis,
): BenchCheck[] {
  const view = viewOf(map);
  const known = analysis ?? analyse(map, ruleSet, facts);
  const checks = checkRegistry.flatMap((definition) => definition.derive(view, ruleSet, facts, known));
  return [...checks.filter((check) => !check.energised), ...checks.filter((check) => check.energised)];
}
