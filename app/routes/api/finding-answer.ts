import { z } from "zod";
import { problem, problemResponse } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { ServiceError } from "~/services/errors";
import { answerFinding } from "~/services/units/answer-finding.server";
import { readJson } from "~/services/units/read-json.server";
import type { Route } from "./+types/finding-answer";

const requestSchema = z.strictObject({ text: z.string().max(4000) });

/** PUT {text}: keeps the builder's answer to a finding in this round of rework; an empty text takes it back. */
export async function action({ request, params, context }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "finding.answer", params.unit);
  if (request.method !== "PUT") return problemResponse(405, "An answer is saved by PUT.");
  const findingId = Number(params.finding);
  if (!Number.isSafeInteger(findingId) || findingId < 1)
    return problemResponse(404, "There is no such finding.");
  try {
    const { text } = await readJson(request, requestSchema);
    return Response.json(await answerFinding(services, { unitNumber: unit.number, findingId, text }));
  } catch (error) {
    if (error instanceof ServiceError) return problem(error);
    throw error;
  }
}
