import { alias } from "drizzle-orm/mysql-core";
import { asc, eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import { type FileView, listFiles } from "~/services/files/list-files.server";
import type { FindingAnswerView, FindingView } from "./sheet-view";

const { findingAnswers, findings, people, revisions } = tables;

/**
 * All findings of a unit by number, over all revisions, with answers, photos and closing.
 *
 * @param files the unit's files, where they have been read already
 */
export async function listFindings(
  db: Reader,
  unitId: number,
  files?: readonly FileView[],
): Promise<FindingView[]> {
  const closer = alias(people, "closer");
  const rows = await db
    .select({
      finding: findings,
      revision: revisions.number,
      raisedBy: people.name,
      closedBy: closer.name,
    })
    .from(findings)
    .innerJoin(revisions, eq(revisions.id, findings.revisionId))
    .innerJoin(people, eq(people.id, findings.raisedById))
    .leftJoin(closer, eq(closer.id, findings.closedById))
    .where(eq(findings.unitId, unitId))
    .orderBy(asc(findings.number));
  if (rows.length === 0) return [];
  const answers = await listAnswers(db, unitId);
  const photos = (files ?? (await listFiles(db, unitId))).filter((file) => file.findingId !== null);
  return rows.map(({ finding, revision, raisedBy, closedBy }) => ({
    id: finding.id,
    number: finding.number,
    severity: finding.severity,
    checkKey: finding.checkKey,
    elementId: finding.elementId,
    text: finding.text,
    revision,
    raisedBy,
    raisedById: finding.raisedById,
    raisedAt: finding.raisedAt,
    photos: photos.filter((photo) => photo.findingId === finding.id),
    answers: answers.get(finding.id) ?? [],
    closing:
      finding.closedAt === null
        ? null
        : { text: finding.closingText ?? "", by: closedBy ?? "", at: finding.closedAt },
  }));
}

async function listAnswers(db: Reader, unitId: number): Promise<Map<number, FindingAnswerView[]>> {
  const rows = await db
    .select({
      findingId: findingAnswers.findingId,
      id: findingAnswers.id,
      revision: revisions.number,
      text: findingAnswers.text,
      answeredBy: people.name,
      answeredAt: findingAnswers.answeredAt,
    })
    .from(findingAnswers)
    .innerJoin(findings, eq(findings.id, findingAnswers.findingId))
    .innerJoin(revisions, eq(revisions.id, findingAnswers.revisionId))
    .innerJoin(people, eq(people.id, findingAnswers.answeredById))
    .where(eq(findings.unitId, unitId))
    .orderBy(asc(findingAnswers.id));
  const byFinding = new Map<number, FindingAnswerView[]>();
  for (const { findingId, ...answer } of rows) {
    byFinding.set(findingId, [...(byFinding.get(findingId) ?? []), answer]);
  }
  return byFinding;
}
