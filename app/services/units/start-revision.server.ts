import { and, eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { UnitRow } from "~/services/unit-act.server";

const { revisions } = tables;

/**
 * Opens the next revision of a unit that is being sent back: a draft whose map is a copy of the examined one. It keeps
 * why the unit was sent back, for its builder and for whoever examines it next.
 * To be called inside the transition's work, which passes the returned number on as `changes: { revision }`.
 */
export async function startRevision(
  tx: Transaction,
  unit: UnitRow,
  at: Date,
  sentBack: { reason: string; byId: number },
): Promise<number> {
  const [examined] = await tx
    .select()
    .from(revisions)
    .where(and(eq(revisions.unitId, unit.id), eq(revisions.number, unit.revision)));
  if (!examined) throw new Error(`Unit ${unit.number} has no revision ${unit.revision}.`);
  const number = unit.revision + 1;
  await tx.insert(revisions).values({
    unitId: unit.id,
    number,
    map: examined.map,
    ruleSetKey: examined.ruleSetKey,
    ruleSetVersion: examined.ruleSetVersion,
    createdAt: at,
    sentBackReason: sentBack.reason,
    sentBackById: sentBack.byId,
  });
  return number;
}
