import { and, eq, inArray } from "drizzle-orm";
import { tables } from "~/db/client.server";
import { loadQueue, type QueueFilter, type QueueRow } from "~/services/bench/queue.server";
import type { ServiceContext } from "~/services/context.server";

const { benchTurns, units } = tables;

export interface SigningRow extends QueueRow {
  /** Why the signed-in person can't decide on it, as far as the queue can tell; null when nothing stands against it. */
  objection: string | null;
}

/** The units that await a signature, page by page, with those told apart that the person has a hand in. */
export async function loadSigningQueue(
  services: ServiceContext,
  filter: Omit<QueueFilter, "state">,
): Promise<{ rows: SigningRow[]; total: number; page: number }> {
  const { rows, total, page } = await loadQueue(services, { ...filter, state: "awaiting_signature" });
  const inspected = await ownInspections(
    services,
    rows.map((row) => row.number),
  );
  return {
    total,
    page,
    rows: rows.map((row) => ({
      ...row,
      objection: row.isOwn ? "You built it" : inspected.has(row.number) ? "You inspected it" : null,
    })),
  };
}

async function ownInspections(
  { db, workshop, person }: ServiceContext,
  numbers: readonly number[],
): Promise<ReadonlySet<number>> {
  if (numbers.length === 0) return new Set();
  const rows = await db
    .selectDistinct({ number: units.number })
    .from(benchTurns)
    .innerJoin(units, eq(units.id, benchTurns.unitId))
    .where(
      and(
        eq(units.workshopId, workshop.id),
        eq(benchTurns.inspectorId, person.id),
        inArray(units.number, [...numbers]),
      ),
    );
  return new Set(rows.map((row) => row.number));
}
