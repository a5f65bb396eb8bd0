import { createHash } from "node:crypto";
import canonicalize from "canonicalize";
import { eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { UnitState } from "~/workflow/states";

const { auditEntries, trailHeads } = tables;

export const GENESIS_HASH = "0".repeat(64);

export interface EntryInput {
  workshopId: number;
  at: Date;
  /** Null for what the product does by itself, such as making a PDF. */
  actorId: number | null;
  /** "area.what", e.g. "unit.submit". */
  act: string;
  unitId?: number;
  fromState?: UnitState;
  toState?: UnitState;
  /** Plain JSON; no personal data beyond ids, no free text that is kept elsewhere. */
  detail?: Record<string, unknown>;
}

export interface HashedEntry {
  workshopId: number;
  sequence: number;
  at: Date;
  actorId: number | null;
  act: string;
  unitId: number | null;
  fromState: UnitState | null;
  toState: UnitState | null;
  detail: Record<string, unknown>;
  previousHash: string;
}

/** SHA-256, in hex, over the RFC 8785 form of an entry. Anybody with the entry can compute it again. */
export function hashEntry(entry: HashedEntry): string {
  const text = canonicalize({
    workshopId: entry.workshopId,
    sequence: entry.sequence,
    at: entry.at.toISOString(),
    actorId: entry.actorId,
    act: entry.act,
    unitId: entry.unitId,
    fromState: entry.fromState,
    toState: entry.toState,
    detail: entry.detail,
    previousHash: entry.previousHash,
  });
  if (text === undefined) throw new TypeError("An audit entry can't be put into canonical form.");
  return createHash("sha256").update(text).digest("hex");
}

/**
 * Appends one entry to the workshop's trail inside the transaction of the act itself.
 * The head's row lock puts concurrent acts of a workshop in order.
 */
export async function appendEntry(tx: Transaction, input: EntryInput): Promise<void> {
  const [head] = await tx
    .select()
    .from(trailHeads)
    .where(eq(trailHeads.workshopId, input.workshopId))
    .for("update");
  if (!head) throw new Error(`Workshop ${input.workshopId} has no trail head.`);
  const entry: HashedEntry = {
    workshopId: input.workshopId,
    sequence: head.sequence + 1,
    at: input.at,
    actorId: input.actorId,
    act: input.act,
    unitId: input.unitId ?? null,
    fromState: input.fromState ?? null,
    toState: input.toState ?? null,
    detail: input.detail ?? {},
    previousHash: head.hash,
  };
  const hash = hashEntry(entry);
  await tx.insert(auditEntries).values({ ...entry, hash });
  await tx
    .update(trailHeads)
    .set({ sequence: entry.sequence, hash })
    .where(eq(trailHeads.workshopId, input.workshopId));
}
