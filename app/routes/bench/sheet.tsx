import {
  ArrowDown,
  CircleCheckBig,
  ClipboardPen,
  GitCompareArrows,
  HandGrab,
  Printer,
  Undo2,
} from "lucide-react";
import { Form, Link } from "react-router";
import { LineVerdictIcon, lineVerdictWords } from "~/components/bench-verdict";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { Button } from "~/components/ui/button";
import { Caution } from "~/components/ui/caution";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { EmptyState } from "~/components/ui/empty-state";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Progress } from "~/components/ui/progress";
import { SeverityBadge } from "~/components/ui/severity-badge";
import { Sheet as Paper } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { TextareaField } from "~/components/ui/textarea-field";
import { Time } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";
import { isDecided, lineVerdicts } from "~/engine/bench-answer";
import { answerTo } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { standingOf } from "~/services/archive/standing.server";
import { loadSheet } from "~/services/bench/load-sheet.server";
import { findPersonName } from "~/services/units/unit-people.server";
import { dayIn } from "~/services/context.server";
import { decide } from "~/workflow/permissions";
import { SentBackNote } from "../units/sent-back-note";
import type { Route } from "./+types/sheet";
import { checkHref } from "./check-href";
import { EngineAnswers } from "./engine-answers";
import { FindingSummary } from "./finding-summary";
import { SheetLines } from "./sheet-lines";
import { parseShow } from "./sheet-filter";

export async function loader({ context, params, url }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "bench.read", params.unit);
  const asked = Number(url.searchParams.get("revision") ?? unit.revision);
  const number = Number.isSafeInteger(asked) && asked >= 1 && asked <= unit.revision ? asked : unit.revision;
  try {
    const sheet = await loadSheet(services, unit, number);
    const person = { id: services.person.id, roles: services.workshop.roles };
    return {
      unit: {
        number: unit.number,
        name: unit.name,
        purpose: unit.purpose,
        placeOfUse: unit.placeOfUse,
        state: unit.state,
        standing: await standingOf(services.db, unit, dayIn(services.workshop.timeZone, services.now())),
        revision: unit.revision,
        version: unit.version,
      },
      builder: await findPersonName(services.db, unit.builderId),
      inspector: unit.inspectorId === null ? null : await findPersonName(services.db, unit.inspectorId),
      revision: {
        number: sheet.revision.number,
        submittedAt: sheet.revision.submittedAt,
        sentBack: sheet.revision.sentBack,
        map: sheet.revision.map,
        facts: sheet.revision.facts,
        ruleSet: `${sheet.revision.ruleSet.title}, version ${sheet.revision.ruleSet.version}`,
      },
      analysis: sheet.analysis,
      lines: sheet.lines.map(({ history: _, ...line }) => line),
      progress: sheet.progress,
      findings: sheet.findings,
      show: parseShow(url.searchParams.get("show")),
      mayTake: decide("bench.take", person, unit).allowed,
      // Who holds it puts it back without a reason.
      mayReclaim: unit.inspectorId !== services.person.id && decide("bench.reclaim", person, unit).allowed,
      mayWork: number === unit.revision && decide("bench.work", person, unit).allowed,
    };
  } catch (error) {
    throw answerTo(error);
  }
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `Bench sheet of unit ${loaderData.unit.number} · Mainsgate` : "Bench sheet" },
];

export default function BenchSheet({ loaderData, params }: Route.ComponentProps) {
  const { unit, revision, lines, progress, findings, mayTake, mayWork, mayReclaim } = loaderData;
  const bench = `/w/${params.workshop}/bench`;
  const nextOpen = lines.find((line) => !isDecided(line.verdict) || line.photoMissing);
  return (
    <>
      <Breadcrumbs items={[{ label: "Bench", to: bench }, { label: `Unit ${unit.number}` }]} />
      <PageHeader
        kicker={`Unit ${unit.number} · bench sheet of revision ${revision.number}`}
        title={unit.name}
        badges={<StateBadge state={unit.state} standing={unit.standing} />}
        actions={
          <>
            {mayTake ? (
              <Form method="post" action={bench}>
                <input type="hidden" name="act" value="take" />
                <input type="hidden" name="unit" value={unit.number} />
                <input type="hidden" name="version" value={unit.version} />
                <Button variant="primary" icon={HandGrab}>
                  Take on the bench
                </Button>
              </Form>
            ) : null}
            {mayWork && nextOpen ? (
              <LinkButton
                to={checkHref(`${bench}/${unit.number}`, nextOpen.check.key)}
                variant="primary"
                icon={ClipboardPen}
              >
                {progress.decided === 0 ? "Begin" : "Go on"}
              </LinkButton>
            ) : null}
            {revision.number > 1 ? (
              <LinkButton to={`${bench}/${unit.number}/changes`} icon={GitCompareArrows}>
                What changed
              </LinkButton>
            ) : null}
            {mayWork ? (
              <>
                <LinkButton
                  to={`${bench}/${unit.number}/close`}
                  icon={CircleCheckBig}
                  variant={nextOpen ? "secondary" : "primary"}
                >
                  Finish or send back
                </LinkButton>
                <ConfirmDialog
                  trigger="Put back"
                  triggerVariant="quiet"
                  triggerIcon={Undo2}
                  title={`Put unit ${unit.number} back into the queue?`}
                  confirm="Put back"
                  confirmVariant="primary"
                  action={bench}
                  fields={{ act: "release", unit: String(unit.number), version: String(unit.version) }}
                >
                  <p>What you have recorded stays on its sheet. Any inspector can take the unit next.</p>
                </ConfirmDialog>
              </>
            ) : null}
            {mayReclaim ? (
              <ConfirmDialog
                trigger="Put back for the inspector"
                triggerVariant="quiet"
                triggerIcon={Undo2}
                title={`Put unit ${unit.number} back into the queue for ${loaderData.inspector ?? "its inspector"}?`}
                confirm="Put back"
                confirmVariant="primary"
                action={bench}
                fields={{ act: "reclaim", unit: String(unit.number), version: String(unit.version) }}
              >
                <p>
                  What was recorded stays on its sheet, and any other inspector can take the unit. Make sure
                  that it doesn’t lie open and live on a bench.
                </p>
                <TextareaField
                  field={{ name: "reason", id: "reclaim-reason" }}
                  label="Why, for its inspector"
                  rows={2}
                  maxLength={1000}
                  required
                />
              </ConfirmDialog>
            ) : null}
            <LinkButton to="#checks" variant="quiet" icon={ArrowDown} className="lg:hidden">
              Checks
            </LinkButton>
            <Button type="button" variant="quiet" icon={Printer} onClick={() => window.print()}>
              Print
            </Button>
          </>
        }
      />
      {unit.revision !== revision.number ? (
        <p className="mb-4 border-l-4 border-advice bg-advice-wash px-4 py-2">
          This is the sheet of an earlier revision, to be read only.{" "}
          <Link to={`${bench}/${unit.number}`} className="text-link">
            Show revision {unit.revision}
          </Link>
        </p>
      ) : null}
      <div className="space-y-5">
        {revision.sentBack ? <SentBackNote sentBack={revision.sentBack} revision={revision.number} /> : null}
        <TitleBlock
          items={[
            { label: "Builder", value: loaderData.builder },
            { label: "Inspector", value: loaderData.inspector ?? "nobody yet" },
            { label: "Submitted", value: <Time at={revision.submittedAt} />, numeric: true },
            {
              label: "Supply",
              value: `${revision.facts.supplyVolts} V, ${revision.facts.supplyHertz} Hz`,
              numeric: true,
            },
            { label: "Protection class", value: revision.facts.protectionClass },
            { label: "Place of use", value: unit.placeOfUse },
            { label: "Purpose", value: unit.purpose },
            { label: "Judged by", value: revision.ruleSet },
          ]}
        />
        <div className={`grid items-start gap-5 ${findings.length > 0 ? "lg:grid-cols-2" : ""}`}>
          <div className={`grid items-start gap-5 ${findings.length > 0 ? "" : "lg:grid-cols-2"}`}>
            <Paper title="Progress">
              <Progress
                label="Checks decided"
                value={progress.decided}
                max={progress.total}
                detail={`${progress.decided} of ${progress.total}`}
              />
              <dl className="mt-3 grid grid-cols-2 gap-x-4 gap-y-1 text-sm">
                {lineVerdicts
                  .filter((verdict) => progress.byVerdict[verdict] > 0)
                  .map((verdict) => (
                    <div key={verdict} className="flex items-center justify-between gap-2">
                      <dt className="flex items-center gap-1.5">
                        <LineVerdictIcon verdict={verdict} size={16} />
                        {lineVerdictWords[verdict]}
                      </dt>
                      <dd className="tabular-nums">{progress.byVerdict[verdict]}</dd>
                    </div>
                  ))}
                {progress.photosMissing > 0 ? (
                  <div className="flex items-center justify-between gap-2">
                    <dt>Photos missing</dt>
                    <dd className="tabular-nums">{progress.photosMissing}</dd>
                  </div>
                ) : null}
              </dl>
            </Paper>
            <Caution sign="voltage">
              Dangerous voltages. The sheet advises; local codes and the judgement of the licensed person
              prevail.
            </Caution>
          </div>
          {findings.length > 0 ? (
            <Paper title="Findings" flush>
              <ul className="divide-y divide-rule">
                {findings.map((finding) => (
                  <li key={finding.id} className="px-4 py-3">
                    <FindingSummary finding={finding} checkBase={`${bench}/${unit.number}`} lines={lines} />
                  </li>
                ))}
              </ul>
            </Paper>
          ) : null}
        </div>
        <EngineAnswers map={revision.map} analysis={loaderData.analysis} />
      </div>
      <Paper id="checks" title="Checks in working order" className="mt-5" flush>
        {lines.length === 0 ? (
          <div className="p-4">
            <EmptyState title="The map calls for no check">
              A sheet without checks decides nothing. Send the unit back so that its map can be completed.
            </EmptyState>
          </div>
        ) : (
          <SheetLines
            lines={lines}
            show={loaderData.show}
            base={`${bench}/${unit.number}`}
            revision={revision.number}
          />
        )}
      </Paper>
      <p className="mt-3 hidden text-sm print:block">
        Readings, limits and verdicts as they stood when this page was printed.
      </p>
      <SeverityLegend />
    </>
  );
}

function SeverityLegend() {
  return (
    <p className="mt-4 flex flex-wrap items-center gap-2 text-sm text-ink-soft print:hidden">
      Findings: <SeverityBadge severity="danger" /> stops a signature, <SeverityBadge severity="defect" />{" "}
      must be put right, <SeverityBadge severity="advice" /> is worth knowing.
    </p>
  );
}
