import { Ban, Download, ExternalLink, FileJson, History } from "lucide-react";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { buttonClass } from "~/components/ui/button";
import { Caution } from "~/components/ui/caution";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { Day, Time } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";
import { answerTo } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { findRecord, type PdfState } from "~/services/archive/find-record.server";
import { loadVersions } from "~/services/units/versions.server";
import { tally } from "~/services/records/record-words";
import { decide } from "~/workflow/permissions";
import { VersionNotes } from "../units/version-notes";
import type { Route } from "./+types/record";
import { RecordConditions } from "./record-conditions";
import { RecordTerms } from "./record-terms";
import { usePdfWatch } from "./use-pdf-watch";

export async function loader({ context, params }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "archive.read", params.unit);
  try {
    const { record, canonicalJson: _, ...stored } = await findRecord(services, unit);
    const holder = { id: services.person.id, roles: services.workshop.roles };
    return {
      stored: { ...stored, pdf: shownPdf(stored.pdf) },
      unit: { number: unit.number, name: unit.name, state: unit.state },
      record: {
        unit: record.unit,
        facts: record.facts,
        ruleSet: record.ruleSet,
        inspectors: [...new Set(record.inspections.map((turn) => turn.inspector))],
        decision: record.decision,
        publicAddress: record.publicAddress,
        cautions: record.cautions,
        checks: tally(record.checks),
        failed: record.checks.filter((check) => check.verdict === "fail").map((check) => check.title),
        findings: record.findings.length,
        openFindings: record.findings.filter((finding) => finding.closing === null).length,
        photos: record.files.filter((file) => file.kind === "photo").length,
      },
      versions: await loadVersions(services.db, unit),
      mayReadTrail: decide("trail.read", holder).allowed,
      mayWithdraw: decide("record.withdraw", holder, unit).allowed,
      maySearch: decide("archive.search", holder).allowed,
    };
  } catch (error) {
    throw answerTo(error);
  }
}

function counted(count: number, word: string): string {
  return `${count === 0 ? "no" : count} ${word}${count === 1 ? "" : "s"}`;
}

/** The store's key is nobody's business outside. */
function shownPdf(pdf: PdfState) {
  return pdf.ready ? { ready: true as const, bytes: pdf.bytes, sha256: pdf.sha256 } : pdf;
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `Record of unit ${loaderData.unit.number} · Mainsgate` : "Record · Mainsgate" },
];

export default function RecordPage({ loaderData, params }: Route.ComponentProps) {
  const { stored, unit, record } = loaderData;
  const base = `/w/${params.workshop}`;
  const api = `/api${base}/records/${unit.number}`;
  usePdfWatch(stored.pdf.ready);
  return (
    <>
      <Breadcrumbs
        items={[
          { label: "Archive", to: loaderData.maySearch ? `${base}/archive` : undefined },
          { label: `Unit ${unit.number}` },
        ]}
      />
      <PageHeader
        kicker={`Record of unit ${unit.number}, revision ${record.unit.revision}`}
        title={unit.name}
        badges={
          <StateBadge
            state={unit.state}
            standing={{ validity: stored.validity.kind, departures: record.decision.departures !== null }}
          />
        }
        actions={
          <>
            {loaderData.mayReadTrail ? (
              <LinkButton to={`${base}/archive/${unit.number}/trail`} icon={History}>
                Trail
              </LinkButton>
            ) : null}
            <LinkButton to={`${base}/units/${unit.number}`}>The unit</LinkButton>
            {loaderData.mayWithdraw ? (
              <LinkButton to={`${base}/archive/${unit.number}/withdraw`} icon={Ban} variant="danger">
                Withdraw
              </LinkButton>
            ) : null}
          </>
        }
      />
      <div className="space-y-5">
        {stored.intact ? null : (
          <Caution title="This record was altered">
            Its stored data no longer give its SHA-256. Don’t rely on it; tell the workshop’s steward.
          </Caution>
        )}
        <VersionNotes slug={params.workshop} {...loaderData.versions} />
        <RecordTerms validity={stored.validity} decision={record.decision} failed={record.failed}>
          {stored.withdrawal ? (
            <Sheet title="Withdrawn">
              <p className="whitespace-pre-line">{stored.withdrawal.reason}</p>
              <p className="mt-2 text-sm text-ink-soft">
                {stored.withdrawal.by}, <Time at={stored.withdrawal.at} />. The record below stays as it was
                made.
              </p>
            </Sheet>
          ) : null}
        </RecordTerms>
        {record.decision.conditions ? (
          <RecordConditions conditions={record.decision.conditions} recheckOn={record.decision.recheckOn} />
        ) : null}
        <TitleBlock
          items={[
            { label: "Purpose", value: record.unit.purpose, wide: true },
            { label: "Place of use", value: record.unit.placeOfUse },
            {
              label: "Supply",
              value: `${record.facts.supplyVolts} V, ${record.facts.supplyHertz} Hz`,
              numeric: true,
            },
            { label: "Protection class", value: record.facts.protectionClass },
            { label: "Limits by", value: `${record.ruleSet.title}, version ${record.ruleSet.version}` },
            { label: "Built by", value: record.unit.builder },
            { label: "Inspected by", value: record.inspectors.join(", ") },
            { label: "Checks", value: record.checks === "" ? "none" : record.checks },
            {
              label: "Findings and photos",
              value: `${counted(record.findings, "finding")}${record.findings > 0 ? ` (${record.openFindings} open)` : ""}, ${counted(record.photos, "photo")}`,
            },
          ]}
        />
        <Sheet
          title="The record itself"
          lead="The PDF is set from the data, and carries them as an attachment."
          footer={
            <p className="text-sm break-all">
              <span className="legend-text block">SHA-256 of the data</span>
              <code>{stored.sha256}</code>
              <span className="block text-ink-soft">
                {stored.intact
                  ? "Computed again just now: it fits."
                  : "Computed again just now: it does not fit."}
              </span>
            </p>
          }
        >
          <div className="flex flex-wrap items-center gap-3">
            {stored.pdf.ready ? (
              <a href={`${api}/pdf`} className={buttonClass("primary")} data-pdf="ready">
                <Download aria-hidden size={18} />
                PDF ({Math.max(1, Math.round(stored.pdf.bytes / 1000))} kB)
              </a>
            ) : (
              <p role="status" className="text-ink-soft">
                {stored.pdf.tries === 0
                  ? "The PDF is being made. It appears here by itself."
                  : `The PDF is not made yet: ${stored.pdf.tries} ${stored.pdf.tries === 1 ? "try" : "tries"} failed, the next comes by itself. The data are safe.`}
              </p>
            )}
            <a href={`${api}/json`} className={buttonClass("secondary")}>
              <FileJson aria-hidden size={18} />
              Data (JSON)
            </a>
            <a href={record.publicAddress} className={buttonClass("quiet")} target="_blank" rel="noreferrer">
              <ExternalLink aria-hidden size={18} />
              Public page behind the code
            </a>
          </div>
        </Sheet>
        <Caution sign="voltage" title="Cautions" items={record.cautions} />
        {record.decision.recheckOn && stored.validity.kind === "recheck-due" ? (
          <p className="text-sm">
            The recheck is due by <Day on={record.decision.recheckOn} />.
          </p>
        ) : null}
      </div>
    </>
  );
}
