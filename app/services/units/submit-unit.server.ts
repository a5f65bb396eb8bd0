import { createHash } from "node:crypto";
import canonicalize from "canonicalize";
import { asc, eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import { submissionProblems } from "~/engine/submission";
import type { EnergyMap } from "~/engine/energy-map";
import { appendEntry } from "~/services/audit/append-entry.server";
import type { ServiceContext } from "~/services/context.server";
import { tellHandOver, unitTitle } from "~/services/mail/hand-over.server";
import { moveUnit, type UnitActInput, type UnitRow } from "~/services/unit-act.server";
import { factsOf, loadRevision } from "./load-revision.server";
import { unansweredFindings } from "./answer-finding.server";

const { findingAnswers, findings, revisions } = tables;

/**
 * Submits a unit for examination: freezes map and facts, pins the rule set and accuracy policy of the workshop, and tells
 * the inspectors.
 *
 * @throws NotFoundError, ForbiddenError, ConflictError, GuardError: the map is incomplete, or findings are unanswered
 */
export function submitUnit(context: ServiceContext, input: UnitActInput): Promise<void> {
  return moveUnit(context, "submit", input, {
    async guards({ tx, unit }) {
      const revision = await loadRevision(tx, unit);
      const open = await unansweredFindings(tx, unit.id, revision.id);
      return {
        "map-complete": submissionProblems(revision.map, factsOf(unit)).map((problem) => problem.text),
        "findings-answered": open.map((finding) => `Finding ${finding.number} has no answer yet.`),
      };
    },
    async work(act) {
      const { tx, unit, at } = act;
      const revision = await loadRevision(tx, unit);
      await tx
        .update(revisions)
        .set({
          submittedAt: at,
          facts: factsOf(unit),
          ruleSetKey: context.workshop.ruleSetKey,
          ruleSetVersion: context.workshop.ruleSetVersion,
          accuracyPolicy: context.workshop.accuracyPolicy,
        })
        .where(eq(revisions.id, revision.id));
      await enterAnswers(context, tx, unit, revision.id, at);
      const told = await tellHandOver(context, act, "submit", () => ({
        subject: `${unitTitle(unit)} waits for the bench`,
        paragraphs: submissionWords(context, unit),
        link: { label: "Open the bench queue", path: "/bench" },
      }));
      return { result: undefined, detail: { mapSha256: hashMap(revision.map), told } };
    },
  });
}

/** From now on the answers of this round can't be changed: each gets its entry in the trail, before the submission's. */
async function enterAnswers(
  context: ServiceContext,
  tx: Transaction,
  unit: UnitRow,
  revisionId: number,
  at: Date,
): Promise<void> {
  const answers = await tx
    .select({ finding: findings.number, text: findingAnswers.text })
    .from(findingAnswers)
    .innerJoin(findings, eq(findings.id, findingAnswers.findingId))
    .where(eq(findingAnswers.revisionId, revisionId))
    .orderBy(asc(findings.number));
  for (const { finding, text } of answers) {
    await appendEntry(tx, {
      workshopId: context.workshop.id,
      at,
      actorId: context.person.id,
      act: "finding.answer",
      unitId: unit.id,
      detail: { finding, revision: unit.revision, textSha256: sha256(text) },
    });
  }
}

function submissionWords(context: ServiceContext, unit: UnitRow): string[] {
  return [
    unit.revision === 1
      ? `${context.person.name} submitted unit ${unit.number}, “${unit.name}”, for examination.`
      : `${context.person.name} reworked unit ${unit.number}, “${unit.name}”, and submitted it again as revision ${unit.revision}.`,
    `It is meant for ${unit.supplyVolts} V, ${unit.supplyHertz} Hz, protection class ${unit.protectionClass}. Until it has been signed it must not be plugged in outside the bench.`,
  ];
}

function hashMap(map: EnergyMap): string {
  return sha256(canonicalize(map) ?? "");
}

function sha256(text: string): string {
  return createHash("sha256").update(text).digest("hex");
}
