import { and, asc, eq } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import type { UnitRow } from "~/services/unit-act.server";
import type { UnitState } from "~/workflow/states";

const { auditEntries, people } = tables;

export interface TrailEntry {
  /** Place in the workshop's trail. */
  sequence: number;
  at: Date;
  /** Null for what the product did by itself. */
  actor: string | null;
  act: string;
  fromState: UnitState | null;
  toState: UnitState | null;
  detail: Record<string, unknown>;
  previousHash: string;
  hash: string;
}

/** Everything that was done to a unit, in order. */
export function readUnitTrail({ db, workshop }: ServiceContext, unit: UnitRow): Promise<TrailEntry[]> {
  return db
    .select({
      sequence: auditEntries.sequence,
      at: auditEntries.at,
      actor: people.name,
      act: auditEntries.act,
      fromState: auditEntries.fromState,
      toState: auditEntries.toState,
      detail: auditEntries.detail,
      previousHash: auditEntries.previousHash,
      hash: auditEntries.hash,
    })
    .from(auditEntries)
    .leftJoin(people, eq(people.id, auditEntries.actorId))
    .where(and(eq(auditEntries.workshopId, workshop.id), eq(auditEntries.unitId, unit.id)))
    .orderBy(asc(auditEntries.sequence));
}
