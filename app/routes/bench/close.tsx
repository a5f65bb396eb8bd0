import { parseWithZod } from "@conform-to/zod/v4";
import { data } from "react-router";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { EmptyState } from "~/components/ui/empty-state";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { answerTo } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { finishSheet, sendBackFromBench } from "~/services/bench/finish-sheet.server";
import { loadSheet } from "~/services/bench/load-sheet.server";
import { decide } from "~/workflow/permissions";
import type { Route } from "./+types/close";
import { CloseFinding } from "./close-finding-form";
import { finishSchema, sendBackSchema } from "./close.schema";
import { FindingSummary } from "./finding-summary";
import { FinishPanel } from "./finish-panel";
import { RaiseFinding } from "./raise-finding-form";
import { SendBackPanel } from "./send-back-panel";

export async function loader({ context, params }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
  try {
    const sheet = await loadSheet(services, unit);
    const decision = decide("bench.finish", { id: services.person.id, roles: services.workshop.roles }, unit);
    return {
      unit: {
        number: unit.number,
        name: unit.name,
        state: unit.state,
        revision: unit.revision,
        version: unit.version,
      },
      lines: sheet.lines.map(({ check, verdict, because, photoMissing }) => ({
        check: { key: check.key, title: check.title },
        verdict,
        because,
        photoMissing,
      })),
      elements: sheet.revision.map.elements.map(({ id, label }) => ({ id, label })),
      findings: sheet.findings,
      whyNot: decision.allowed ? null : decision.reason,
      personId: services.person.id,
    };
  } catch (error) {
    throw answerTo(error);
  }
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const form = await readForm(request);
  const bench = `/w/${params.workshop}/bench`;
  if (form.get("act") === "finish") {
    const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
    const submission = parseWithZod(form, { schema: finishSchema });
    if (submission.status !== "success") {
      return data({ ...submission.reply(), conflict: null, act: "finish" as const }, { status: 400 });
    }
    try {
      await finishSheet(services, { unitNumber: unit.number, expectedVersion: submission.value.version });
    } catch (error) {
      const refused = refuseForm(error, submission);
      return data({ ...refused.data, act: "finish" as const }, refused.init ?? {});
    }
    return redirectWithFlash(
      bench,
      `The sheet of unit ${unit.number} is finished. The electricians have been told.`,
    );
  }
  const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
  const submission = parseWithZod(form, { schema: sendBackSchema });
  if (submission.status !== "success") {
    return data({ ...submission.reply(), conflict: null, act: "send-back" as const }, { status: 400 });
  }
  try {
    const { version, reason } = submission.value;
    await sendBackFromBench(services, { unitNumber: unit.number, expectedVersion: version, reason });
  } catch (error) {
    const refused = refuseForm(error, submission);
    return data({ ...refused.data, act: "send-back" as const }, refused.init ?? {});
  }
  return redirectWithFlash(bench, `Unit ${unit.number} went back to its builder, who has been told.`);
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  {
    title: loaderData
      ? `Finish the sheet of unit ${loaderData.unit.number} · Mainsgate`
      : "Finish · Mainsgate",
  },
];

export default function CloseSheet({ loaderData, actionData, params }: Route.ComponentProps) {
  const { unit, lines, findings, elements, whyNot, personId } = loaderData;
  const bench = `/w/${params.workshop}/bench`;
  const base = `${bench}/${unit.number}`;
  const draftKey = [
    "mainsgate",
    "bench",
    params.workshop,
    personId,
    unit.number,
    unit.revision,
    "close",
  ].join(" ");
  return (
    <>
      <Breadcrumbs
        items={[
          { label: "Bench", to: bench },
          { label: `Unit ${unit.number}`, to: base },
          { label: "Finish or send back" },
        ]}
      />
      <PageHeader
        kicker={
          <>
            Unit {unit.number}, <bdi>{unit.name}</bdi>, revision {unit.revision}
          </>
        }
        title="Finish or send back"
        badges={<StateBadge state={unit.state} />}
        actions={<LinkButton to={base}>Whole sheet</LinkButton>}
      />
      {whyNot !== null ? (
        <EmptyState
          title="There is nothing to finish here"
          action={<LinkButton to={base}>Show the sheet</LinkButton>}
        >
          {whyNot}
        </EmptyState>
      ) : (
        <div className="grid items-start gap-5 lg:grid-cols-2">
          <FinishPanel
            unit={unit}
            lines={lines}
            base={base}
            result={actionData?.act === "finish" ? actionData : undefined}
          />
          <div className="space-y-5">
            <SendBackPanel
              unit={unit}
              openFindings={findings.filter((finding) => finding.closing === null).length}
              draftKey={draftKey}
              base={base}
              result={actionData?.act === "send-back" ? actionData : undefined}
            />
            <Sheet
              title="Findings"
              lead="An open danger stops the signature. Only an inspector closes a finding."
            >
              <div className="space-y-6">
                {findings.map((finding) => (
                  <div key={finding.id} className="space-y-3 border-b border-rule pb-5">
                    <FindingSummary finding={finding} lines={lines} checkBase={base} />
                    {finding.closing ? null : (
                      <CloseFinding finding={finding} draftKey={draftKey} base={base} />
                    )}
                  </div>
                ))}
                <RaiseFinding check={null} elements={elements} draftKey={draftKey} base={base} />
              </div>
            </Sheet>
          </div>
        </div>
      )}
    </>
  );
}
