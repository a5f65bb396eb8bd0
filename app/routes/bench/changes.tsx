import { parseWithZod } from "@conform-to/zod/v4";
import { Copy } from "lucide-react";
import { data, Form, Link, useNavigation } from "react-router";
import { z } from "zod";
import { familyTitles } from "~/engine/bench-check";
import { readingText } from "~/components/bench-reading";
import { LineVerdictBadge } from "~/components/bench-verdict";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { changedFieldLabel, changedValueText } from "~/components/map-change-words";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Badge } from "~/components/ui/badge";
import { Button } from "~/components/ui/button";
import { EmptyState } from "~/components/ui/empty-state";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { Time } from "~/components/ui/time";
import { answerTo } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { type CarryLine, carryOver, loadChanges } from "~/services/bench/carry-over.server";
import { decide } from "~/workflow/permissions";
import type { Route } from "./+types/changes";
import { checkHref } from "./check-href";

const carrySchema = z.object({
  version: z.number().int().positive(),
  checks: z
    .array(z.string("Load the page again.").min(1, "Load the page again.").max(190, "Load the page again."), {
      error: "Tick the checks to carry over.",
    })
    .min(1, "Tick the checks to carry over.")
    .max(500, "Tick at most 500 checks at a time."),
});

export async function loader({ context, params }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
  try {
    const changes = await loadChanges(services, unit);
    const decision = decide("bench.work", { id: services.person.id, roles: services.workshop.roles }, unit);
    return {
      unit: { number: unit.number, name: unit.name, revision: unit.revision, version: unit.version },
      changes: changes && {
        mapChanges: changes.mapChanges,
        otherChanges: changes.otherChanges,
        lines: changes.lines.map(({ check, choice, earlier, line }) => ({
          check: { key: check.key, title: check.title, family: check.family },
          choice,
          earlier,
          verdict: line.verdict,
        })),
      },
      whyNot: decision.allowed ? null : decision.reason,
    };
  } catch (error) {
    throw answerTo(error);
  }
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
  const submission = parseWithZod(await readForm(request), { schema: carrySchema });
  if (submission.status !== "success") {
    return data({ ...submission.reply(), conflict: null }, { status: 400 });
  }
  try {
    const count = await carryOver(services, {
      unitNumber: unit.number,
      expectedVersion: submission.value.version,
      checkKeys: submission.value.checks,
    });
    return await redirectWithFlash(
      `/w/${params.workshop}/bench/${unit.number}/changes`,
      `${count} ${count === 1 ? "answer was" : "answers were"} carried over.`,
    );
  } catch (error) {
    return refuseForm(error, submission);
  }
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `Changes of unit ${loaderData.unit.number} · Mainsgate` : "Changes · Mainsgate" },
];

type ChangeLine = Pick<CarryLine, "choice" | "earlier"> & {
  check: Pick<CarryLine["check"], "key" | "title" | "family">;
  verdict: CarryLine["line"]["verdict"];
};

export default function Changes({ loaderData, actionData, params }: Route.ComponentProps) {
  const { unit, changes, whyNot } = loaderData;
  const bench = `/w/${params.workshop}/bench`;
  const base = `${bench}/${unit.number}`;
  return (
    <>
      <Breadcrumbs
        items={[
          { label: "Bench", to: bench },
          { label: `Unit ${unit.number}`, to: base },
          { label: "What changed" },
        ]}
      />
      <PageHeader
        kicker={
          <>
            Unit {unit.number}, <bdi>{unit.name}</bdi>
          </>
        }
        title={
          changes ? `What changed from revision ${unit.revision - 1} to ${unit.revision}` : "What changed"
        }
        actions={<LinkButton to={base}>Whole sheet</LinkButton>}
      />
      {changes ? (
        <div className="space-y-5">
          <MapChanges changes={changes} />
          <CarryForm
            lines={changes.lines}
            version={unit.version}
            base={base}
            whyNot={whyNot}
            errors={actionData?.error?.[""] ?? actionData?.error?.checks ?? undefined}
            conflict={actionData?.conflict ?? null}
          />
        </div>
      ) : (
        <EmptyState
          title="This is the first revision"
          action={<LinkButton to={base}>Show the sheet</LinkButton>}
        >
          There is nothing to compare it with.
        </EmptyState>
      )}
    </>
  );
}

function MapChanges({ changes }: { changes: NonNullable<Route.ComponentProps["loaderData"]["changes"]> }) {
  const nothing = changes.mapChanges.length === 0 && changes.otherChanges.length === 0;
  return (
    <Sheet title="In the map and the facts">
      {nothing ? (
        <p>
          The map and the unit’s facts are the same as before. What was mended by hand doesn’t show here: look
          at the builder’s answers to the findings.
        </p>
      ) : (
        <ul className="space-y-3">
          {changes.otherChanges.map((text) => (
            <li key={text}>{text}</li>
          ))}
          {changes.mapChanges.map((change) => (
            <li key={`${change.subject} ${change.id}`}>
              <p className="flex flex-wrap items-center gap-2">
                <Badge tone="outline">{change.change}</Badge>
                {change.text}
              </p>
              {change.fields.length > 0 ? (
                <dl className="mt-1 grid gap-x-4 text-sm sm:grid-cols-[auto_1fr]">
                  {change.fields.map(({ field, before, after }) => (
                    <div key={field} className="contents">
                      <dt className="text-ink-soft">{changedFieldLabel(field)}</dt>
                      <dd className="tabular-nums">
                        <del>{changedValueText(field, before)}</del> <span aria-hidden>→</span>{" "}
                        <ins className="no-underline font-medium">{changedValueText(field, after)}</ins>
                      </dd>
                    </div>
                  ))}
                </dl>
              ) : null}
            </li>
          ))}
        </ul>
      )}
    </Sheet>
  );
}

function CarryForm({
  lines,
  version,
  base,
  whyNot,
  errors,
  conflict,
}: {
  lines: readonly ChangeLine[];
  version: number;
  base: string;
  whyNot: string | null;
  errors: string[] | undefined;
  conflict: string | null;
}) {
  const pending = useNavigation().state === "submitting";
  const again = lines.filter((line) => line.choice.kind === "do-again");
  const may = lines.filter((line) => line.choice.kind === "may-carry");
  const answered = lines.filter((line) => line.choice.kind === "answered");
  return (
    <>
      {conflict ? <ConflictNotice message={conflict} reloadHref={`${base}/changes`} /> : null}
      <Sheet
        title={`To be done again (${again.length})`}
        lead="The change can touch these, or they were not passed before."
        flush
      >
        <ul className="divide-y divide-rule">
          {again.map(({ check, choice, earlier }) => (
            <li key={check.key} className="px-4 py-3">
              <Link to={checkHref(base, check.key)} className="text-link font-medium">
                {check.title}
              </Link>
              <span className="text-sm text-ink-soft">{` ${familyTitles[check.family]}`}</span>
              {earlier ? (
                <span className="ml-2">
                  <LineVerdictBadge verdict={earlier.verdict} />
                </span>
              ) : null}
              {choice.kind === "do-again" ? (
                <p className="text-sm text-ink-soft">{choice.because.join(" ")}</p>
              ) : null}
            </li>
          ))}
          {again.length === 0 ? <li className="px-4 py-3 text-ink-soft">None.</li> : null}
        </ul>
      </Sheet>
      <Sheet
        title={`May be carried over (${may.length})`}
        lead="The change can’t affect these. Tick each one that you stand for: the earlier answer then counts for this revision, with a pointer to it and your name."
        flush
      >
        <Form method="post">
          <input type="hidden" name="version" value={version} />
          <div className="px-4 pt-3">
            <FormErrorSummary form={{ errors }} title="Nothing was carried over" />
          </div>
          <ul className="divide-y divide-rule">
            {may.map((line) => (
              <li key={line.check.key} className="px-4">
                <CarryChoiceLine line={line} disabled={whyNot !== null} />
              </li>
            ))}
            {may.length === 0 ? <li className="px-4 py-3 text-ink-soft">None.</li> : null}
          </ul>
          {may.length > 0 ? (
            <div className="border-t border-rule px-4 py-3">
              {whyNot === null ? (
                <Button
                  size="bench"
                  variant="primary"
                  icon={Copy}
                  pending={pending}
                  pendingLabel="Carrying over…"
                >
                  Carry over what is ticked
                </Button>
              ) : (
                <p className="text-ink-soft">To be read only: {whyNot}</p>
              )}
            </div>
          ) : null}
        </Form>
      </Sheet>
      {answered.length > 0 ? (
        <Sheet title={`Answered on this revision (${answered.length})`} flush>
          <ul className="divide-y divide-rule">
            {answered.map(({ check, verdict }) => (
              <li key={check.key} className="flex flex-wrap items-center gap-3 px-4 py-2">
                <LineVerdictBadge verdict={verdict} />
                <Link to={checkHref(base, check.key)} className="text-link">
                  {check.title}
                </Link>
              </li>
            ))}
          </ul>
        </Sheet>
      ) : null}
    </>
  );
}

function CarryChoiceLine({ line: { check, earlier }, disabled }: { line: ChangeLine; disabled: boolean }) {
  return (
    <label className="flex min-h-14 items-start gap-3 py-3">
      <input
        type="checkbox"
        name="checks"
        value={check.key}
        disabled={disabled}
        className="mt-0.5 size-7 shrink-0 accent-copper"
      />
      <span className="min-w-0">
        <span className="font-medium">{check.title}</span>
        <span className="text-sm text-ink-soft">{` ${familyTitles[check.family]}`}</span>
        {earlier ? (
          <span className="mt-1 flex flex-wrap items-center gap-x-3 gap-y-1 text-sm">
            <LineVerdictBadge verdict={earlier.verdict} />
            <span className="font-medium tabular-nums">{readingText(earlier.observation)}</span>
            <span className="text-ink-soft">
              {earlier.observation.instrument ? `${earlier.observation.instrument.name}, ` : ""}
              {earlier.observation.by}, <Time at={earlier.observation.at} style="date" />, revision{" "}
              {earlier.observation.revision}
            </span>
          </span>
        ) : null}
      </span>
    </label>
  );
}
