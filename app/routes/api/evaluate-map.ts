import { z } from "zod";
import { analyse } from "~/engine/analyse";
import { energyMapSchema } from "~/engine/energy-map";
import { submissionProblems } from "~/engine/submission";
import { unitFactsSchema } from "~/engine/unit-facts";
import { problem, problemResponse } from "~/middleware/answers.server";
import { authorise, authoriseUnit } from "~/middleware/authorise.server";
import { InvalidInputError } from "~/services/errors";
import { readJson } from "~/services/units/read-json.server";
import { factsOf, requireRuleSet } from "~/services/units/load-revision.server";
import type { Route } from "./+types/evaluate-map";

const requestSchema = z.strictObject({
  map: energyMapSchema,
  facts: unitFactsSchema.optional(),
  unit: z.number().int().positive().optional(),
});

/**
 * POST {map, facts} or {map, unit}: what the engine says about a map under the workshop's rule set, and what keeps it
 * from submission. `unit` is the number of a unit whose facts are taken.
 */
export async function action({ request, context }: Route.ActionArgs) {
  const { workshop } = authorise(context, "map.evaluate");
  try {
    const input = await readJson(request, requestSchema);
    const { map } = input;
    const facts = input.facts ?? (input.unit === undefined ? null : await readFacts(context, input.unit));
    if (!facts)
      return problemResponse(422, "Send the unit's facts, or the number of a unit.", { field: "facts" });
    const ruleSet = requireRuleSet(workshop.ruleSetKey, workshop.ruleSetVersion);
    return Response.json({
      ruleSet: { key: ruleSet.key, version: ruleSet.version },
      analysis: analyse(map, ruleSet, facts),
      submissionProblems: submissionProblems(map, facts),
    });
  } catch (error) {
    if (error instanceof InvalidInputError) return problem(error);
    throw error;
  }
}

async function readFacts(context: Route.ActionArgs["context"], unitNumber: number) {
  const { unit } = await authoriseUnit(context, "unit.read", String(unitNumber));
  return factsOf(unit);
}

export function loader() {
  return problemResponse(405, "Send the map and the facts by POST.");
}
