import { useNavigate } from "react-router";
import { MapEditor } from "~/components/map-editor";
import { LinkButton } from "~/components/ui/link-button";
import { authoriseUnit } from "~/middleware/authorise.server";
import { standingOf } from "~/services/archive/standing.server";
import { dayIn } from "~/services/context.server";
import { loadRevision, requireRuleSet } from "~/services/units/load-revision.server";
import { decide } from "~/workflow/permissions";
import type { Route } from "./+types/map";
import { MapOverview } from "./map-overview";
import { MapTables } from "./map-tables";
import { UnitHead } from "./unit-head";

export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  const { db, person, workshop } = services;
  const editable = decide("unit.edit", { id: person.id, roles: workshop.roles }, unit).allowed;
  const revision = await loadRevision(db, unit);
  return {
    head: {
      slug: workshop.slug,
      number: unit.number,
      name: unit.name,
      state: unit.state,
      standing: await standingOf(db, unit, dayIn(workshop.timeZone, services.now())),
      revision: unit.revision,
      editable,
    },
    personId: person.id,
    map: revision.map,
    edition: revision.mapEdition,
    facts: revision.facts,
    // A draft will be judged by what the workshop uses when it is submitted.
    ruleSet: editable ? requireRuleSet(workshop.ruleSetKey, workshop.ruleSetVersion) : revision.ruleSet,
  };
}

export const meta: Route.MetaFunction = ({ params }) => [
  { title: `Energy map of unit ${params.unit} · Mainsgate` },
];

export default function UnitMap({ loaderData }: Route.ComponentProps) {
  const { head, personId, map, edition, facts, ruleSet } = loaderData;
  const navigate = useNavigate();
  const base = `/w/${head.slug}/units/${head.number}`;
  const api = `/api/w/${head.slug}/units/${head.number}/map`;
  return (
    <>
      <UnitHead {...head} here="Energy map" />
      {head.editable ? (
        <MapEditor
          // Another unit or revision is another draft, with its own way back.
          key={`${head.slug} ${head.number} ${head.revision}`}
          url={api}
          // Per person too: a shared workshop computer must not offer one builder what another one typed.
          keptKey={`mainsgate map ${personId} ${head.slug} ${head.number} ${head.revision}`}
          map={map}
          edition={edition}
          revision={head.revision}
          facts={facts}
          ruleSet={ruleSet}
          exportName={`unit-${head.number}-revision-${head.revision}`}
          onContinue={() => void navigate(head.state === "sent_back" ? `${base}/rework` : base)}
        />
      ) : (
        <div className="space-y-5">
          <MapOverview map={map} ruleSet={ruleSet} facts={facts} base={base} mayEdit={false} />
          <MapTables map={map} />
          <LinkButton to={api} reloadDocument>
            Export JSON
          </LinkButton>
        </div>
      )}
    </>
  );
}
