import { Zap } from "lucide-react";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { EmptyState } from "~/components/ui/empty-state";
import { LinkButton } from "~/components/ui/link-button";
import { Sheet } from "~/components/ui/sheet";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { readForm } from "~/middleware/read-form.server";
import { loadRework } from "~/services/units/load-rework.server";
import { submitUnit } from "~/services/units/submit-unit.server";
import type { Route } from "./+types/rework";
import { AnswerForm } from "./answer-form";
import { ChangeList } from "./change-list";
import { FindingList } from "./finding-list";
import { SubmitPanel } from "./submit-panel";
import { unitActionSchema } from "./unit-action.schema";
import { refuse, refuseUnreadable } from "./refusal.server";
import { SentBackNote } from "./sent-back-note";
import { UnitHead } from "./unit-head";

export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "finding.answer", params.unit);
  return { slug: services.workshop.slug, ...(await loadRework(services, unit)) };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  const input = unitActionSchema.safeParse(Object.fromEntries(await readForm(request)));
  if (!input.success || input.data.intent !== "submit") {
    return refuseUnreadable();
  }
  try {
    await submitUnit(services, { unitNumber: unit.number, expectedVersion: input.data.version });
  } catch (error) {
    return refuse(error);
  }
  return redirectWithFlash(
    `/w/${services.workshop.slug}/units/${unit.number}`,
    `Revision ${unit.revision} of unit ${unit.number} is submitted. The inspectors have been told.`,
  );
}

export const meta: Route.MetaFunction = ({ params }) => [
  { title: `Rework of unit ${params.unit} · Mainsgate` },
];

export default function Rework({ loaderData, actionData }: Route.ComponentProps) {
  const { slug, unit, open, closed, changes, submission, photos } = loaderData;
  const base = `/w/${slug}/units/${unit.number}`;
  const api = `/api/w/${slug}`;
  return (
    <>
      <UnitHead slug={slug} {...unit} standing={null} editable here="Rework" />
      <div className="space-y-5">
        {actionData?.conflict ? (
          <ConflictNotice message={actionData.message} reloadHref={`${base}/rework`} />
        ) : null}
        {loaderData.sentBack ? (
          <SentBackNote sentBack={loaderData.sentBack} revision={unit.revision} />
        ) : null}
        <Sheet
          title={`Findings to answer (${open.length})`}
          lead="Say what you changed, or why nothing needs to change, and show it. Answers save themselves."
          flush
        >
          {open.length === 0 ? (
            <div className="p-4">
              <EmptyState title="No finding is open">
                The unit was sent back without one, or all have been closed. Change what has to change and
                submit again.
              </EmptyState>
            </div>
          ) : (
            <ol className="divide-y divide-rule">
              {open.map((finding) => (
                <AnswerForm
                  key={finding.id}
                  finding={finding}
                  api={api}
                  unit={unit.number}
                  revision={unit.revision}
                  keptKey={`mainsgate answer ${loaderData.personId} ${slug} ${finding.id} ${unit.revision}`}
                />
              ))}
            </ol>
          )}
        </Sheet>
        <Sheet
          title="Changes to the map"
          lead={`Against revision ${unit.revision - 1}, as it was examined. The inspector sees this list too.`}
          actions={
            <LinkButton to={`${base}/map`} icon={Zap}>
              Edit the map
            </LinkButton>
          }
        >
          <ChangeList changes={changes} />
        </Sheet>
        <SubmitPanel
          base={base}
          unit={unit}
          submission={submission}
          photos={photos}
          mayDiscard={false}
          refused={actionData?.reasons ?? null}
        />
        {closed.length > 0 ? (
          <Sheet title={`Closed findings (${closed.length})`} flush>
            <FindingList findings={closed} api={api} unit={unit.number} />
          </Sheet>
        ) : null}
      </div>
    </>
  );
}
