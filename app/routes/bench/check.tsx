import { parseWithZod } from "@conform-to/zod/v4";
import { ListChecks } from "lucide-react";
import { data, isRouteErrorResponse } from "react-router";
import { familyTitles } from "~/engine/bench-check";
import { LineVerdictBadge } from "~/components/bench-verdict";
import { PhotoStrip } from "~/components/photo-strip";
import { PhotoUpload } from "~/components/photo-upload";
import { Caution } from "~/components/ui/caution";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { LinkButton } from "~/components/ui/link-button";
import { Sheet } from "~/components/ui/sheet";
import { answerTo } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { loadCheck } from "~/services/bench/load-check.server";
import { closeFinding, raiseFinding } from "~/services/bench/raise-finding.server";
import { type AnswerInput, recordObservation } from "~/services/bench/record-observation.server";
import { decide } from "~/workflow/permissions";
import type { z } from "zod";
import type { Route } from "./+types/check";
import { AnswerPanel } from "./answer-panel";
import { CheckFindings } from "./check-findings";
import { CheckBackground, CheckQuestion } from "./check-question";
import { closingSchema, findingSchema, observeSchema } from "./check.schema";
import { StepBar } from "./step-bar";

/** The whole screen belongs to the work: no navigation row. */
export const handle = { focus: true };

export async function loader({ context, params, url }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
  try {
    const { sheet, ...step } = await loadCheck(services, unit, url.searchParams.get("key"));
    const decision = decide("bench.work", { id: services.person.id, roles: services.workshop.roles }, unit);
    return {
      ...step,
      unit: { number: unit.number, name: unit.name, revision: unit.revision },
      total: sheet.lines.length,
      decided: sheet.progress.decided,
      elements: sheet.revision.map.elements.map(({ id, label }) => ({ id, label })),
      policy: sheet.accuracyPolicy,
      whyNot: decision.allowed ? null : decision.reason,
      personId: services.person.id,
    };
  } catch (error) {
    throw answerTo(error);
  }
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
  const form = await readForm(request);
  switch (form.get("act")) {
    case "observe": {
      const submission = parseWithZod(form, { schema: observeSchema });
      if (submission.status !== "success") return invalid(submission);
      const { key, latestId, reason, note } = submission.value;
      try {
        const id = await recordObservation(services, {
          unitNumber: unit.number,
          checkKey: key,
          latestId: latestId ?? null,
          answer: answerOf(submission.value),
          reason,
          note,
        });
        return data({ saved: id });
      } catch (error) {
        return refuseForm(error, submission);
      }
    }
    case "raise-finding": {
      const submission = parseWithZod(form, { schema: findingSchema });
      if (submission.status !== "success") return invalid(submission);
      const { key, severity, text, element } = submission.value;
      try {
        const { id } = await raiseFinding(services, {
          unitNumber: unit.number,
          severity,
          text,
          checkKey: key ?? null,
          elementId: element ?? null,
        });
        return data({ saved: id });
      } catch (error) {
        return refuseForm(error, submission);
      }
    }
    case "close-finding": {
      const submission = parseWithZod(form, { schema: closingSchema });
      if (submission.status !== "success") return invalid(submission);
      const { finding, text } = submission.value;
      try {
        await closeFinding(services, { unitNumber: unit.number, findingId: finding, text });
        return data({ saved: finding });
      } catch (error) {
        return refuseForm(error, submission);
      }
    }
    default:
      return data({ error: { "": ["This form is not known here."] }, conflict: null }, { status: 400 });
  }
}

function invalid(submission: Parameters<typeof refuseForm>[1]) {
  return data({ ...submission.reply(), conflict: null }, { status: 400 });
}

function answerOf(value: z.output<typeof observeSchema>): AnswerInput {
  switch (value.kind) {
    case "measured": {
      const { kind, value: reading, bound, unit, instrumentId, conditions } = value;
      return {
        kind,
        value: reading,
        bound: bound === "shown" ? null : bound,
        unit,
        instrumentId,
        conditions,
      };
    }
    case "examined":
      return { kind: value.kind, conforms: value.conforms === "yes" };
    case "not-applicable":
    case "not-possible":
      return { kind: value.kind };
  }
}

// Shared by the page and its client action, which keeps the two in one chunk: an action in a chunk of its own would have to
// be fetched at the very moment when the connection is lost.
const KEPT = "What is typed here is kept on this device until it is saved.";

/**
 * A lost connection or a server that is away must not replace the page: what is typed stays, and the form says what
 * happened. Refusals that the server put into words go on to the error page.
 */
export async function clientAction({ serverAction }: Route.ClientActionArgs) {
  try {
    return await serverAction();
  } catch (error) {
    if (error instanceof Response || (isRouteErrorResponse(error) && error.status < 500)) throw error;
    // The status keeps React Router from reading the page anew, which would fail in the same way.
    return data(
      {
        error: { "": [`The server could not be reached, or could not save this. Try again. ${KEPT}`] },
        conflict: null,
      },
      { status: 503 },
    );
  }
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  {
    title: loaderData
      ? `${loaderData.line.check.title} · unit ${loaderData.unit.number} · Mainsgate`
      : "Check · Mainsgate",
  },
];

export default function CheckPage({ loaderData, actionData, params }: Route.ComponentProps) {
  const { unit, line, index, total, decided, whyNot, personId } = loaderData;
  const { check } = line;
  const base = `/w/${params.workshop}/bench/${unit.number}`;
  const api = `/api/w/${params.workshop}`;
  const draftKey = [
    "mainsgate",
    "bench",
    params.workshop,
    personId,
    unit.number,
    unit.revision,
    check.key,
  ].join(" ");
  return (
    <div className="pb-28 print:pb-0">
      <header className="mb-4 flex flex-wrap items-start justify-between gap-3 border-b border-rule-strong pb-3">
        <div className="min-w-0">
          <p className="legend-text">
            Unit {unit.number}, <bdi>{unit.name}</bdi>
            {` · step ${index + 1} of ${total} · ${decided} decided`}
          </p>
          <h1 className="text-2xl sm:text-3xl">{check.title}</h1>
          <p className="text-ink-soft">{familyTitles[check.family]}</p>
        </div>
        <div className="flex flex-wrap items-center gap-3">
          <LineVerdictBadge verdict={line.verdict} size="bench" />
          <LinkButton to={base} size="bench" icon={ListChecks}>
            Sheet
          </LinkButton>
        </div>
      </header>
      <RefusedWithoutScript answer={actionData} />
      {loaderData.beforeMains.length > 0 ? (
        <Caution
          sign="voltage"
          title="Do not connect mains:"
          items={loaderData.beforeMains}
          size="bench"
          className="mb-5 wrap-anywhere"
        />
      ) : null}
      {/* On a tablet the answer comes right after the question; on a desk it stands beside both. */}
      <div className="grid items-start gap-5 lg:grid-cols-2 lg:grid-rows-[auto_1fr]">
        <CheckQuestion check={check} />
        <div className="space-y-5 lg:row-span-2">
          <AnswerPanel
            // Another check or another latest answer is another form.
            key={`${check.key} ${line.observation?.id ?? 0}`}
            line={line}
            instruments={loaderData.instruments}
            policy={loaderData.policy}
            againstMains={loaderData.beforeMains.length > 0}
            whyNot={whyNot}
            draftKey={draftKey}
            nextOpenKey={loaderData.nextOpenKey}
          />
          <Sheet
            title="Photos"
            lead={
              check.photo === "required"
                ? "At least one photo of this revision is required."
                : "A photo helps whoever decides."
            }
          >
            <div className="space-y-4">
              {line.photoMissing ? (
                <p className="font-medium text-undecided">The required photo is missing.</p>
              ) : null}
              <PhotoStrip
                files={line.photos}
                api={api}
                unit={unit.number}
                alt={`Photo for ${check.title}`}
                editableRevision={whyNot === null ? unit.revision : undefined}
              />
              {whyNot === null ? (
                <PhotoUpload
                  key={check.key}
                  action={`${api}/units/${unit.number}/files`}
                  fields={{ subject: "check", checkKey: check.key }}
                  size="bench"
                />
              ) : null}
            </div>
          </Sheet>
          <CheckFindings
            key={check.key}
            check={check}
            findings={line.findings}
            elements={loaderData.elements}
            mayWork={whyNot === null}
            api={api}
            base={base}
            unit={unit.number}
            draftKey={draftKey}
          />
        </div>
        <div className="space-y-5">
          <CheckBackground check={check} elements={loaderData.elements} />
          {whyNot === null ? <p className="text-sm text-ink-soft print:hidden">{KEPT}</p> : null}
        </div>
      </div>
      <StepBar
        base={base}
        previousKey={loaderData.previousKey}
        nextKey={loaderData.nextKey}
        nextOpenKey={loaderData.nextOpenKey}
        mayWork={whyNot === null}
      />
    </div>
  );
}

/** The forms here are sent by fetchers, which tell refusals themselves; only without JavaScript does one come as a whole page. */
function RefusedWithoutScript({ answer }: { answer: Route.ComponentProps["actionData"] }) {
  if (!answer || "saved" in answer) return null;
  const errors = Object.values(answer.error ?? {}).flatMap((messages) => messages ?? []);
  return (
    <div className="mb-5">
      {answer.conflict ? <ConflictNotice message={answer.conflict} /> : null}
      <FormErrorSummary form={{ errors }} title="This was not saved" />
    </div>
  );
}
