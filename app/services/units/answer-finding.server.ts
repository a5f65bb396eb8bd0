import { and, asc, eq, isNull } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError, NotFoundError } from "~/services/errors";
import { actOnUnit } from "~/services/unit-act.server";
import { loadRevision } from "./load-revision.server";

const { findingAnswers, findings } = tables;

export interface AnswerInput {
  unitNumber: number;
  findingId: number;
  /** Kept as typed; an empty one takes the answer back. */
  text: string;
}

/**
 * Keeps the builder's answer to a finding for the revision being reworked. It can be changed until the unit is
 * submitted again; its saving leaves no entry in the trail, the submission makes one for each answer.
 *
 * @throws NotFoundError, ForbiddenError, ConflictError when the finding has been closed
 */
export function answerFinding(context: ServiceContext, input: AnswerInput): Promise<{ savedAt: Date }> {
  return actOnUnit(context, "finding.answer", { unitNumber: input.unitNumber }, async ({ tx, unit, at }) => {
    const [finding] = await tx
      .select()
      .from(findings)
      .where(and(eq(findings.id, input.findingId), eq(findings.unitId, unit.id)));
    if (!finding) throw new NotFoundError("The finding");
    if (finding.closedAt) throw new ConflictError(`Finding ${finding.number} has been closed meanwhile.`);
    const revision = await loadRevision(tx, unit);
    const text = input.text.trim();
    const own = and(eq(findingAnswers.findingId, finding.id), eq(findingAnswers.revisionId, revision.id));
    if (text === "") {
      await tx.delete(findingAnswers).where(own);
    } else {
      const values = { text, answeredById: context.person.id, answeredAt: at };
      await tx
        .insert(findingAnswers)
        .values({ findingId: finding.id, revisionId: revision.id, ...values })
        .onDuplicateKeyUpdate({ set: values });
    }
    return { result: { savedAt: at }, act: null };
  });
}

/** The open findings of a unit that have no answer in this revision. */
export async function unansweredFindings(
  db: Reader,
  unitId: number,
  revisionId: number,
): Promise<{ id: number; number: number }[]> {
  return db
    .select({ id: findings.id, number: findings.number })
    .from(findings)
    .leftJoin(
      findingAnswers,
      and(eq(findingAnswers.findingId, findings.id), eq(findingAnswers.revisionId, revisionId)),
    )
    .where(and(eq(findings.unitId, unitId), isNull(findings.closedAt), isNull(findingAnswers.id)))
    .orderBy(asc(findings.number));
}
