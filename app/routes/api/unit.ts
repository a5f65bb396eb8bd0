import { authoriseUnit } from "~/middleware/authorise.server";
import { listFiles } from "~/services/files/list-files.server";
import { listRevisions, loadRevision } from "~/services/units/load-revision.server";
import { findPersonName } from "~/services/units/unit-people.server";
import type { Route } from "./+types/unit";

/** GET: one unit with its current map, files and revisions. */
export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  const [revision, revisions, files, builder] = await Promise.all([
    loadRevision(services.db, unit),
    listRevisions(services.db, unit.id),
    listFiles(services.db, unit.id),
    findPersonName(services.db, unit.builderId),
  ]);
  return Response.json({
    number: unit.number,
    name: unit.name,
    purpose: unit.purpose,
    placeOfUse: unit.placeOfUse,
    state: unit.state,
    revision: unit.revision,
    version: unit.version,
    builder,
    facts: revision.facts,
    map: revision.map,
    ruleSet: { key: revision.ruleSet.key, version: revision.ruleSet.version },
    revisions: revisions.map(({ number, createdAt, submittedAt }) => ({ number, createdAt, submittedAt })),
    files,
    createdAt: unit.createdAt,
    changedAt: unit.changedAt,
  });
}
