import type { EnergyMap } from "./energy-map";
import type { Problem } from "./problem";
import { mapProblems } from "./problems";
import type { UnitFacts } from "./unit-facts";

/** The reasons why this map cannot be submitted yet; empty when it can. */
export function submissionProblems(map: EnergyMap, facts: UnitFacts): Problem[] {
  return mapProblems(map, facts).filter(({ blocking }) => blocking);
}
