import type { Reader } from "~/db/client.server";
import { analyse } from "~/engine/analyse";
import {
  type BenchAnswer,
  isDecided,
  judgeBenchReading,
  type LineVerdict,
  lineVerdict,
} from "~/engine/bench-answer";
import type { BenchCheck } from "~/engine/bench-check";
import { deriveBenchSheet } from "~/engine/bench-sheet";
import type { Judgement, UncertaintyPolicy } from "~/engine/verdict";
import type { ServiceContext } from "~/services/context.server";
import { type FileView, listFiles } from "~/services/files/list-files.server";
import type { UnitRow } from "~/services/unit-act.server";
import { type LoadedRevision, loadRevision } from "~/services/units/load-revision.server";
import { listFindings } from "./findings.server";
import { listObservations, type UnitObservation } from "./observations.server";
import type { FindingView, ObservationView, Sheet, SheetLine, SheetProgress } from "./sheet-view";

/**
 * The bench sheet of a unit: the checks that its revision calls for, with readings, verdicts, photos and findings. The
 * verdicts are computed here, every time, from what was stored.
 *
 * @param revisionNumber the current revision when left out
 * @param db an open transaction, where the sheet must be read under the unit's lock
 */
export async function loadSheet(
  services: Pick<ServiceContext, "db" | "workshop">,
  unit: UnitRow,
  revisionNumber?: number,
  db: Reader = services.db,
): Promise<Sheet> {
  const revision = await loadRevision(db, unit, revisionNumber);
  const observations = await listObservations(db, unit.id);
  const files = await listFiles(db, unit.id);
  const findings = await listFindings(db, unit.id, files);
  const sheet = buildSheet(revision, observations, files, findings, services.workshop.accuracyPolicy);
  return { ...sheet, findings, files };
}

/**
 * Puts a sheet together from what was read of its unit.
 *
 * @param all the unit's observations over all revisions, the earliest first
 * @param policyOfNow the workshop's, for a draft: it will be judged by what the workshop uses when it is submitted
 */
export function buildSheet(
  revision: LoadedRevision,
  all: readonly UnitObservation[],
  files: readonly FileView[],
  findings: readonly FindingView[],
  policyOfNow: UncertaintyPolicy,
): Omit<Sheet, "findings" | "files"> {
  const accuracyPolicy = revision.accuracyPolicy ?? policyOfNow;
  const analysis = analyse(revision.map, revision.ruleSet, revision.facts);
  const checks = deriveBenchSheet(revision.map, revision.ruleSet, revision.facts, analysis);
  const observations = all.filter((each) => each.revisionId === revision.id);
  const photos = files.filter((file) => file.subject === "check");

  const lines = checks.map((check): SheetLine => {
    const history = observations.filter((each) => each.checkKey === check.key).reverse();
    const observation = history[0] ?? null;
    const ownPhotos = photos.filter(
      (photo) => photo.checkKey === check.key && photo.revision <= revision.number,
    );
    return {
      check,
      ...judgeLine(check, observation, accuracyPolicy),
      observation,
      history,
      photos: ownPhotos,
      photoMissing: isPhotoMissing(check, observation, ownPhotos, revision.number),
      findings: findings.filter((finding) => finding.checkKey === check.key),
    };
  });
  return { revision, accuracyPolicy, analysis, lines, progress: progressOf(lines) };
}

/** The verdict of one check from its latest observation: the reading judged, then combined with the engine's answer. */
function judgeLine(
  check: BenchCheck,
  observation: ObservationView | null,
  policy: UncertaintyPolicy,
): { verdict: LineVerdict; because: string; judged: Judgement | null } {
  const computed = check.computed?.verdict ?? null;
  const answer = observation && answerOf(check, observation, policy);
  return {
    ...lineVerdict(computed, answer),
    judged: answer?.kind === "measured" ? answer.judgement : null,
  };
}

/** What an observation answers to the check as it is asked now; null when it answers another kind of question. */
function answerOf(
  check: BenchCheck,
  observation: ObservationView,
  policy: UncertaintyPolicy,
): BenchAnswer | null {
  switch (observation.kind) {
    case "not-applicable":
    case "not-possible":
      return { kind: observation.kind };
    case "examined":
      if (check.asks.kind !== "examination" || observation.conforms === null) return null;
      return { kind: "examined", conforms: observation.conforms };
    case "measured": {
      const { value, unit, bound, accuracy } = observation;
      if (check.asks.kind !== "reading" || value === null || unit === null) return null;
      return {
        kind: "measured",
        judgement: judgeBenchReading(check.asks.limit, { value, unit, bound }, accuracy, policy),
      };
    }
  }
}

/** A step that doesn't apply or can't be done needs no photo; a carried-over one may lean on the photo of its day. */
function isPhotoMissing(
  check: BenchCheck,
  observation: ObservationView | null,
  photos: readonly FileView[],
  revision: number,
): boolean {
  if (check.photo !== "required") return false;
  if (observation?.kind === "not-applicable" || observation?.kind === "not-possible") return false;
  const since = observation?.carried ? observation.revision : revision;
  return !photos.some((photo) => photo.revision >= since);
}

function progressOf(lines: readonly SheetLine[]): SheetProgress {
  const count = (verdict: LineVerdict) => lines.filter((line) => line.verdict === verdict).length;
  return {
    total: lines.length,
    decided: lines.filter((line) => isDecided(line.verdict)).length,
    byVerdict: {
      pass: count("pass"),
      fail: count("fail"),
      undecided: count("undecided"),
      open: count("open"),
      "not-applicable": count("not-applicable"),
      "not-possible": count("not-possible"),
    },
    photosMissing: lines.filter((line) => line.photoMissing).length,
  };
}

/** What keeps the sheet from being finished or signed, as sentences for the guards of the transition table. */
export function sheetGuards(sheet: Pick<Sheet, "lines">): {
  "checks-decided": string[];
  "photos-present": string[];
} {
  return {
    "checks-decided":
      sheet.lines.length === 0
        ? ["The sheet has no check at all: the map calls for none, so nothing can be decided."]
        : sheet.lines
            .filter((line) => !isDecided(line.verdict))
            .map(
              (line) =>
                `${line.check.title}: ${line.verdict === "open" ? "not done yet" : "undecided"}. ${line.because}`,
            ),
    "photos-present": sheet.lines
      .filter((line) => line.photoMissing)
      .map((line) => `${line.check.title}: the required photo is missing.`),
  };
}
