import { z } from "zod";
import { energyMapSchema } from "~/engine/energy-map";
import { problem, problemResponse } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { ServiceError } from "~/services/errors";
import { loadRevision } from "~/services/units/load-revision.server";
import { readJson } from "~/services/units/read-json.server";
import { MapConflictError, saveMap } from "~/services/units/save-map.server";
import type { Route } from "./+types/unit-map";

const requestSchema = z.strictObject({
  map: energyMapSchema,
  revision: z.number().int().positive(),
  edition: z.number().int().positive(),
});

/** GET: the unit's current map as a file. */
export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  const { map, number } = await loadRevision(services.db, unit);
  return new Response(JSON.stringify(map, null, 2), {
    headers: {
      "Content-Type": "application/json",
      "Content-Disposition": `attachment; filename="unit-${unit.number}-revision-${number}.json"`,
    },
  });
}

/**
 * PUT {map, revision, edition}: saves the draft of the map, whole. 409 with `theirs` and `edition` when it was saved
 * elsewhere since this edition was read.
 */
export async function action({ request, params, context }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.edit", params.unit);
  if (request.method !== "PUT") return problemResponse(405, "A map is saved by PUT.");
  try {
    const input = await readJson(request, requestSchema);
    return Response.json(await saveMap(services, { unitNumber: unit.number, ...input }));
  } catch (error) {
    if (error instanceof MapConflictError) {
      return problemResponse(409, error.message, { theirs: error.theirs, edition: error.edition });
    }
    if (error instanceof ServiceError) return problem(error);
    throw error;
  }
}
