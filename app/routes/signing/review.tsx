import { parseWithZod } from "@conform-to/zod/v4";
import { data, redirect } from "react-router";
import { MapDiagram } from "~/components/map-diagram";
import { PhotoStrip } from "~/components/photo-strip";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { StatementList } from "~/components/statement-list";
import { Caution } from "~/components/ui/caution";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { Time } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";
import { clientAddressContext } from "~/context";
import { answerTo, refusal } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { type FormRefusal, refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { SheetLines } from "~/routes/bench/sheet-lines";
import { dayIn } from "~/services/context.server";
import { AuthenticationError, InvalidInputError } from "~/services/errors";
import { signUnit, refuseUnit } from "~/services/signing/decide-on-unit.server";
import { loadReview } from "~/services/signing/load-review.server";
import { sendBackFromReview } from "~/services/signing/send-back.server";
import { type ReviewGuard, reviewGuards } from "~/services/signing/review-guards";
import { reportGuards } from "~/services/signing/signing-guards.server";
import { addMonths, lastRecheckDay } from "~/services/signing/signing-rules";
import { archivedStates } from "~/workflow/states";
import type { Route } from "./+types/review";
import {
  type DecisionKind,
  decisionKindSchema,
  refuseSchema,
  sendBackSchema,
  sentDecisionSchema,
  signatureOf,
  signSchema,
} from "./decide.schema";
import { DecisionPanel } from "./decision-panel";
import { GuardPanel } from "./guard-panel";
import { ReviewFindings } from "./review-findings";
import { ReviewHistory } from "./review-history";

export async function loader({ context, params, url }: Route.LoaderArgs) {
  const found = await authoriseUnit(context, "signing.queue", params.unit);
  const archived: readonly string[] = archivedStates;
  if (archived.includes(found.unit.state)) throw redirect(`/w/${params.workshop}/archive/${params.unit}`);
  const { services, unit } = await authoriseUnit(context, "signing.review", params.unit);
  try {
    const { workshop, person, now } = services;
    const review = await loadReview(services, unit);
    const at = now();
    const report = reportGuards(review, { person, roles: workshop.roles }, workshop.timeZone, at);
    const today = dayIn(workshop.timeZone, at);
    const latest = lastRecheckDay(today);
    const proposed = addMonths(today, workshop.recheckMonths);
    return {
      unit: {
        number: unit.number,
        name: unit.name,
        purpose: unit.purpose,
        placeOfUse: unit.placeOfUse,
        state: unit.state,
        version: unit.version,
      },
      builder: review.builder,
      signer: report.licence?.holderName ?? person.name,
      guards: reviewGuards.map((guard) => ({ guard, reasons: report.guards[guard] })),
      licence: report.licence && {
        holder: report.licence.holderName,
        number: report.licence.number,
        authority: report.licence.authority,
        validTo: report.licence.validTo,
      },
      failed: report.failed.map((line) => line.check.title),
      revision: {
        number: review.sheet.revision.number,
        map: review.sheet.revision.map,
        facts: review.sheet.revision.facts,
        ruleSet: review.sheet.revision.ruleSet.title,
        submittedAt: review.sheet.revision.submittedAt,
      },
      analysis: review.sheet.analysis,
      lines: review.sheet.lines.map(({ history: _, ...line }) => line),
      progress: review.sheet.progress,
      findings: review.findings,
      files: review.files,
      revisions: review.revisions,
      turns: review.turns,
      proposal: {
        place: unit.placeOfUse,
        supply: `${review.sheet.revision.facts.supplyVolts} V, ${review.sheet.revision.facts.supplyHertz} Hz${review.sheet.revision.facts.protectionClass === "I" ? ", socket with protective earth" : ""}`,
        recheckOn: proposed < latest ? proposed : latest,
        earliest: addDay(today),
        latest,
      },
      decide: decisionKindSchema.parse(url.searchParams.get("decide")),
    };
  } catch (error) {
    throw answerTo(error);
  }
}

function addDay(day: string): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + 86_400_000).toISOString().slice(0, 10);
}

/** The password never goes back to the page, and the drawing is still on it. */
const hideFields = ["password", "signatureImage"];

export async function action({ request, context, params }: Route.ActionArgs) {
  // Not by the unit's state: the second of two clicks comes when it is signed already, and gets the first one's result.
  const { services, unit } = await authoriseUnit(context, "signing.decide", params.unit);
  const form = await readForm(request);
  const known = sentDecisionSchema.safeParse(form.get("act"));
  if (!known.success) throw refusal(400, "Say whether you sign, refuse or send back. Nothing was decided.");
  const act = known.data;
  if (unit.state === "awaiting_signature") await authoriseUnit(context, `signing.${act}`, params.unit);
  const common = { unitNumber: unit.number, address: context.get(clientAddressContext) };
  const archive = `/w/${params.workshop}/archive/${unit.number}`;

  if (act === "send-back") {
    const submission = parseWithZod(form, { schema: sendBackSchema });
    if (submission.status !== "success") {
      return data({ ...submission.reply(), conflict: null, act }, { status: 400 });
    }
    const { version, ...input } = submission.value;
    try {
      await sendBackFromReview(services, { ...common, ...input, expectedVersion: version });
    } catch (error) {
      return answered(refuseForm(error, submission), act);
    }
    return redirectWithFlash(
      `/w/${params.workshop}/signing`,
      `Unit ${unit.number} went back to its builder, who has been told.`,
    );
  }

  if (act === "refuse") {
    const submission = parseWithZod(form, { schema: refuseSchema });
    if (submission.status !== "success") {
      return data({ ...submission.reply({ hideFields }), conflict: null, act }, { status: 400 });
    }
    const { version, statement, password } = submission.value;
    try {
      const { before } = await refuseUnit(services, {
        ...common,
        expectedVersion: version,
        statement,
        password,
        signature: signatureOf(submission.value),
      });
      return await redirectWithFlash(
        archive,
        before
          ? "It was refused already, once."
          : `Unit ${unit.number} is refused. Builder and inspector have been told.`,
      );
    } catch (error) {
      return answered(refuseForm(onPasswordField(error), hiding(submission)), act);
    }
  }

  const submission = parseWithZod(form, { schema: signSchema });
  if (submission.status !== "success") {
    return data({ ...submission.reply({ hideFields }), conflict: null, act }, { status: 400 });
  }
  const { version, statement, departures, recheckOn, password, place, supply, load, supervision, other } =
    submission.value;
  try {
    const { before } = await signUnit(services, {
      ...common,
      expectedVersion: version,
      statement,
      departures: departures ?? null,
      conditions: { place, supply, load, supervision, other },
      recheckOn,
      password,
      signature: signatureOf(submission.value),
    });
    return await redirectWithFlash(
      archive,
      before
        ? "It was signed already by your first click, once."
        : `Unit ${unit.number} is signed. Builder and inspector have been told; the PDF is being made.`,
    );
  } catch (error) {
    return answered(refuseForm(onPasswordField(error), hiding(submission)), act);
  }
}

function answered({ data: refusal, init }: ReturnType<typeof refuseForm>, act: DecisionKind) {
  return data({ ...refusal, act }, init ?? {});
}

/** A wrong password is told beside its field. */
function onPasswordField(error: unknown): unknown {
  return error instanceof AuthenticationError ? new InvalidInputError("password", error.message) : error;
}

interface Submission {
  reply(options?: {
    formErrors?: string[];
    fieldErrors?: Record<string, string[]>;
    hideFields?: string[];
  }): FormRefusal | Omit<FormRefusal, "conflict">;
}

function hiding(submission: Submission): Parameters<typeof refuseForm>[1] {
  return { reply: (options) => submission.reply({ ...options, hideFields }) };
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `Review unit ${loaderData.unit.number} · Mainsgate` : "Review · Mainsgate" },
];

/** The guards that also stand before a refusal. */
const refusalGuards: readonly ReviewGuard[] = ["licence-in-date", "licence-in-scope"];

export default function Review({ loaderData, actionData, params }: Route.ComponentProps) {
  const { unit, revision, guards, findings, files, lines } = loaderData;
  const base = `/w/${params.workshop}`;
  const benchBase = `${base}/bench/${unit.number}`;
  const reasonsOf = (wanted: readonly ReviewGuard[]) =>
    guards
      .filter(({ guard }) => wanted.includes(guard))
      .flatMap(({ reasons }) => reasons.map(({ text }) => text));
  const [barred = null] = reasonsOf(["independent"]);
  const openFindings = findings.filter((finding) => finding.closing === null).length;
  return (
    <>
      <Breadcrumbs items={[{ label: "Signing", to: `${base}/signing` }, { label: `Unit ${unit.number}` }]} />
      <PageHeader
        kicker={`Unit ${unit.number}, revision ${revision.number}`}
        title={unit.name}
        badges={<StateBadge state={unit.state} />}
        actions={
          <a href="#decide" className="text-link inline-flex min-h-11 items-center font-semibold">
            To the decision
          </a>
        }
      />
      <div className="space-y-5">
        <TitleBlock
          items={[
            { label: "Purpose", value: unit.purpose, wide: true },
            { label: "Place of use", value: unit.placeOfUse },
            {
              label: "Supply",
              value: `${revision.facts.supplyVolts} V, ${revision.facts.supplyHertz} Hz`,
              numeric: true,
            },
            { label: "Protection class", value: revision.facts.protectionClass },
            { label: "Built by", value: loaderData.builder },
            { label: "Limits by", value: revision.ruleSet },
            { label: "Submitted", value: <Time at={revision.submittedAt} /> },
            {
              label: "Checks",
              value: `${loaderData.progress.decided} of ${loaderData.progress.total} decided, ${loaderData.progress.byVerdict.fail} failed`,
            },
            {
              label: "Findings",
              value: findings.length === 0 ? "none" : `${findings.length}, of which ${openFindings} open`,
            },
          ]}
        />
        <GuardPanel guards={guards} licence={loaderData.licence} benchBase={benchBase} />
        <Sheet id="map" title="Energy map" lead="As described by the builder, and what follows from it.">
          <div className="space-y-5">
            <MapDiagram map={revision.map} analysis={loaderData.analysis} />
            <StatementList statements={loaderData.analysis.statements} />
          </div>
        </Sheet>
        <Sheet id="sheet" title="Bench sheet" flush>
          <SheetLines lines={lines} show="all" base={benchBase} revision={revision.number} />
        </Sheet>
        <ReviewFindings
          findings={findings}
          lines={lines}
          benchBase={benchBase}
          api={`/api/w/${params.workshop}`}
          unit={unit.number}
        />
        <Sheet id="photos" title="Photos and drawings">
          {files.length === 0 ? (
            <p className="text-ink-soft">There are none.</p>
          ) : (
            <PhotoStrip
              files={files}
              api={`/api/w/${params.workshop}`}
              unit={unit.number}
              alt={`Unit ${unit.number}`}
            />
          )}
        </Sheet>
        <ReviewHistory revisions={loaderData.revisions} turns={loaderData.turns} />
        <Caution sign="voltage" title="Your judgement decides">
          What is computed and measured here advises you. The codes in force at the place of use and your own
          judgement prevail; if something is not clear, send the unit back.
        </Caution>
        <DecisionPanel
          kind={loaderData.decide}
          result={actionData}
          version={unit.version}
          signer={loaderData.signer}
          failed={loaderData.failed}
          openFindings={openFindings}
          proposal={loaderData.proposal}
          reloadHref={`${base}/signing/${unit.number}`}
          barred={barred}
          againstSigning={reasonsOf(reviewGuards)}
          againstRefusing={reasonsOf(refusalGuards)}
        />
      </div>
    </>
  );
}
