import { eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";

const { formerBuilders } = tables;

/** Remembers that somebody built on a unit which another builder goes on with. Again is no fault. */
export async function addFormerBuilder(
  tx: Transaction,
  former: typeof formerBuilders.$inferInsert,
): Promise<void> {
  await tx.insert(formerBuilders).ignore().values(former);
}

/** A new version holds the work of everybody who built on the one before. */
export async function copyFormerBuilders(tx: Transaction, fromUnitId: number, toUnitId: number) {
  const rows = await tx.select().from(formerBuilders).where(eq(formerBuilders.unitId, fromUnitId));
  if (rows.length === 0) return;
  await tx.insert(formerBuilders).values(rows.map((row) => ({ ...row, unitId: toUnitId })));
}
