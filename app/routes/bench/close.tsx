import { getFormProps, useForm } from "@conform-to/react";
import { parseWithZod } from "@conform-to/zod/v4";
import { CameraOff, CircleCheckBig, Undo2 } from "lucide-react";
import { data, Form, Link, useNavigation } from "react-router";
import { LineVerdictBadge } from "~/components/bench-verdict";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { Caution } from "~/components/ui/caution";
import { EmptyState } from "~/components/ui/empty-state";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { TextareaField } from "~/components/ui/textarea-field";
import { useKeptDraft } from "~/components/bench-kept-draft";
import { isDecided } from "~/engine/bench-answer";
import { answerTo } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { listFindings } from "~/services/bench/findings.server";
import { finishSheet, sendBackFromBench } from "~/services/bench/finish-sheet.server";
import { loadSheet } from "~/services/bench/load-sheet.server";
import { decide } from "~/workflow/permissions";
import { z } from "zod";
import type { Route } from "./+types/close";
import { checkHref } from "./check-href";
import { CloseFinding } from "./close-finding-form";
import { finishSchema, sendBackSchema } from "./close.schema";
import { FindingSummary } from "./finding-summary";
import { RaiseFinding } from "./raise-finding-form";

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
      findings: await listFindings(services.db, unit.id),
      whyNot: decision.allowed ? null : decision.reason,
      personId: services.person.id,
    };
  } catch (error) {
    throw answerTo(error);
  }
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const form = await request.formData();
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
        kicker={`Unit ${unit.number}, ${unit.name}, revision ${unit.revision}`}
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

type Data = Route.ComponentProps["loaderData"];
type Result = Route.ComponentProps["actionData"];

function FinishPanel({
  unit,
  lines,
  base,
  result,
}: Pick<Data, "unit" | "lines"> & { base: string; result: Result }) {
  const navigation = useNavigation();
  const pending = navigation.formData?.get("act") === "finish";
  const undecided = lines.filter((line) => !isDecided(line.verdict));
  const photoless = lines.filter((line) => line.photoMissing);
  const failed = lines.filter((line) => line.verdict === "fail");
  const ready = lines.length > 0 && undecided.length === 0 && photoless.length === 0;
  // The server's sentences are the list below; only what the page doesn't know yet is told beside it.
  const reasons = result?.error?.[""];
  const refusals =
    reasons && !ready ? ["What stands in the way is listed below, with links."] : (reasons ?? undefined);
  return (
    <Sheet title="Finish the sheet" lead="Hands the unit over for review and signature.">
      <div className="space-y-4">
        {result?.conflict ? <ConflictNotice message={result.conflict} reloadHref={`${base}/close`} /> : null}
        <FormErrorSummary form={{ errors: refusals }} title="The sheet can’t be finished yet" />
        {ready ? (
          <p>Every check is decided and every required photo is there.</p>
        ) : (
          <div className="space-y-3 border-l-4 border-undecided bg-undecided-wash px-4 py-3">
            <p className="font-semibold">What still stands in the way</p>
            {lines.length === 0 ? <p>The map calls for no check, so nothing can be decided.</p> : null}
            <ul className="space-y-1.5">
              {undecided.map((line) => (
                <li key={line.check.key} className="grid grid-cols-[8.5rem_1fr] items-center gap-2">
                  <span>
                    <LineVerdictBadge verdict={line.verdict} />
                  </span>
                  <CheckLink base={base} check={line.check} />
                </li>
              ))}
              {photoless.map((line) => (
                <li
                  key={`photo ${line.check.key}`}
                  className="grid grid-cols-[8.5rem_1fr] items-center gap-2"
                >
                  <span className="inline-flex items-center gap-1.5 text-sm font-semibold">
                    <CameraOff aria-hidden size={17} /> Photo missing
                  </span>
                  <CheckLink base={base} check={line.check} />
                </li>
              ))}
            </ul>
          </div>
        )}
        {failed.length > 0 ? (
          <Caution title={failed.length === 1 ? "One check failed" : `${failed.length} checks failed`}>
            <p>
              The sheet can be finished all the same: an electrician must be able to refuse on it. If the
              builder should put it right first, send it back instead.
            </p>
            <ul className="mt-2 list-disc pl-5">
              {failed.map((line) => (
                <li key={line.check.key}>
                  <Link to={checkHref(base, line.check.key)} className="text-link">
                    {line.check.title}
                  </Link>
                </li>
              ))}
            </ul>
          </Caution>
        ) : null}
        <Form method="post" className="space-y-3">
          <input type="hidden" name="act" value="finish" />
          <input type="hidden" name="version" value={unit.version} />
          <Button
            size="bench"
            variant="primary"
            icon={CircleCheckBig}
            pending={pending}
            pendingLabel="Finishing…"
          >
            Finish the sheet
          </Button>
        </Form>
      </div>
    </Sheet>
  );
}

function CheckLink({ base, check }: { base: string; check: { key: string; title: string } }) {
  return (
    <Link
      to={checkHref(base, check.key)}
      className="text-link inline-flex min-h-8 items-center pointer-coarse:min-h-11"
    >
      {check.title}
    </Link>
  );
}

const reasonDraftSchema = z.object({ reason: z.string() });

function parseReasonDraft(kept: unknown) {
  const parsed = reasonDraftSchema.safeParse(kept);
  return parsed.success ? parsed.data : null;
}

function SendBackPanel({
  unit,
  openFindings,
  draftKey,
  base,
  result,
}: Pick<Data, "unit"> & { openFindings: number; draftKey: string; base: string; result: Result }) {
  const navigation = useNavigation();
  const pending = navigation.formData?.get("act") === "send-back";
  const draft = useKeptDraft(`${draftKey} reason`, { reason: "" }, parseReasonDraft);
  const [form, fields] = useForm({
    id: "send-back",
    lastResult: result,
    onValidate: ({ formData }) => parseWithZod(formData, { schema: sendBackSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet
      title="Send it back"
      lead="Opens a new revision; the builder answers the findings and submits again."
    >
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        {result?.conflict ? <ConflictNotice message={result.conflict} reloadHref={`${base}/close`} /> : null}
        <FormErrorSummary form={form} labels={{ reason: "Reason" }} title="It was not sent back" />
        <p className={openFindings === 0 ? "font-medium text-undecided" : ""}>
          {openFindings === 0
            ? "There is no open finding yet: raise one, so that the builder knows what to put right."
            : `${openFindings} open ${openFindings === 1 ? "finding goes" : "findings go"} with it.`}
        </p>
        <input type="hidden" name="act" value="send-back" />
        <input type="hidden" name="version" value={unit.version} />
        <TextareaField
          field={fields.reason}
          label="Why it goes back"
          size="bench"
          rows={3}
          maxLength={2000}
          value={draft.values.reason}
          onChange={(event) => draft.change({ reason: event.currentTarget.value })}
        />
        <Button size="bench" variant="danger" icon={Undo2} pending={pending} pendingLabel="Sending back…">
          Send it back to the builder
        </Button>
      </Form>
    </Sheet>
  );
}
