import type { CurrentWorkshop } from "~/context";
import type { SigningConditions } from "~/db/schema/decisions";
import type { FindingView, ObservationView, SheetLine } from "~/services/bench/sheet-view";
import type { LicenceView } from "~/services/people/licences.server";
import type { Review } from "~/services/signing/load-review.server";
import { recordCautions, type RecordCheck, type RecordObservation, type UnitRecord } from "./record-format";

export interface DecisionFacts {
  kind: "signed" | "refused";
  at: Date;
  statement: string;
  departures: string | null;
  conditions: SigningConditions | null;
  recheckOn: string | null;
  signer: string;
  licence: LicenceView;
  signature: { method: "drawn"; imageSha256: string } | { method: "typed"; typedName: string };
}

/** Puts a review and the decision on it into the record's form. */
export function composeRecord(
  review: Review,
  workshop: CurrentWorkshop,
  decision: DecisionFacts,
  address: { publicCode: string; publicAddress: string },
): UnitRecord {
  const { unit, sheet, findings } = review;
  const { holderName, number, authority, validFrom, validTo, maxSupplyVolts, coversBatteries } =
    decision.licence;
  return {
    format: "mainsgate-record",
    version: 1,
    ...address,
    workshop: { name: workshop.name, timeZone: workshop.timeZone, demo: workshop.isDemo },
    unit: {
      number: unit.number,
      name: unit.name,
      purpose: unit.purpose,
      placeOfUse: unit.placeOfUse,
      builder: review.builder,
      revision: sheet.revision.number,
      revisions: review.revisions.map((revision) => ({
        number: revision.number,
        submittedAt: moment(revision.submittedAt),
      })),
    },
    facts: sheet.revision.facts,
    map: sheet.revision.map,
    ruleSet: {
      key: sheet.revision.ruleSet.key,
      version: sheet.revision.ruleSet.version,
      title: sheet.revision.ruleSet.title,
      region: sheet.revision.ruleSet.region,
    },
    accuracyPolicy: sheet.accuracyPolicy,
    statements: sheet.analysis.statements.map(({ family, level, text, elements, conductors }) => ({
      family,
      level,
      text,
      elements,
      conductors,
    })),
    inspections: review.turns.map((turn) => ({
      inspector: turn.inspector,
      revision: turn.revision,
      takenAt: turn.takenAt.toISOString(),
      endedAt: moment(turn.endedAt),
    })),
    checks: sheet.lines.map(composeCheck),
    findings: findings.map(composeFinding),
    files: review.files.map((file) => ({
      id: file.id,
      kind: file.kind,
      subject: file.subject,
      checkKey: file.checkKey,
      finding: findings.find((finding) => finding.id === file.findingId)?.number ?? null,
      revision: file.revision,
      caption: file.caption,
      contentType: file.contentType,
      bytes: file.bytes,
      width: file.width,
      height: file.height,
      sha256: file.sha256,
      addedBy: file.addedBy,
      addedAt: file.addedAt.toISOString(),
    })),
    decision: {
      kind: decision.kind,
      at: decision.at.toISOString(),
      statement: decision.statement,
      departures: decision.departures,
      conditions: decision.conditions,
      recheckOn: decision.recheckOn,
      signer: {
        name: decision.signer,
        licence: {
          holder: holderName,
          number,
          authority,
          validFrom,
          validTo,
          maxSupplyVolts,
          coversBatteries,
        },
      },
      signature: decision.signature,
    },
    cautions: [...recordCautions],
  };
}

function composeCheck(line: SheetLine): RecordCheck {
  const { check, judged } = line;
  return {
    key: check.key,
    family: check.family,
    title: check.title,
    why: check.why,
    method: check.method,
    cautions: check.cautions,
    citations: check.citations,
    subjects: check.subjects,
    asks:
      check.asks.kind === "reading"
        ? { kind: "reading", quantity: check.asks.quantity, unit: check.asks.unit, limit: check.asks.limit }
        : check.asks,
    computed: check.computed,
    judged: judged && {
      verdict: judged.verdict,
      expandedUncertainty: judged.expandedUncertainty,
      guardBand: judged.guardBand,
      reason: judged.reason,
    },
    verdict: line.verdict,
    because: line.because,
    observation: line.observation && composeObservation(line.observation),
    earlier: line.history.slice(1).map(composeObservation),
  };
}

function composeObservation(observation: ObservationView): RecordObservation {
  const { instrument, carried } = observation;
  return {
    kind: observation.kind,
    value: observation.value,
    bound: observation.bound,
    unit: observation.unit,
    conforms: observation.conforms,
    conditions: observation.conditions,
    reason: observation.reason,
    note: observation.note,
    instrument: instrument && {
      name: instrument.name,
      serial: instrument.serial,
      kind: instrument.kind,
      calibrationDue: instrument.calibrationDue,
    },
    accuracy: observation.accuracy,
    by: observation.by,
    at: observation.at.toISOString(),
    revision: observation.revision,
    corrects: observation.correctsId !== null,
    carriedOver: carried && { by: carried.by, at: carried.at.toISOString() },
  };
}

function composeFinding(finding: FindingView): UnitRecord["findings"][number] {
  return {
    number: finding.number,
    severity: finding.severity,
    checkKey: finding.checkKey,
    elementId: finding.elementId,
    text: finding.text,
    revision: finding.revision,
    raisedBy: finding.raisedBy,
    raisedAt: finding.raisedAt.toISOString(),
    answers: finding.answers.map((answer) => ({
      revision: answer.revision,
      text: answer.text,
      by: answer.answeredBy,
      at: answer.answeredAt.toISOString(),
    })),
    closing: finding.closing && {
      text: finding.closing.text,
      by: finding.closing.by,
      at: finding.closing.at.toISOString(),
    },
  };
}

function moment(date: Date | null): string | null {
  return date === null ? null : date.toISOString();
}
