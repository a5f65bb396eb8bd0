import { and, asc, eq, gt } from "drizzle-orm";
import { type Database, tables } from "~/db/client.server";
import { GENESIS_HASH, hashEntry } from "./append-entry.server";

const { auditEntries, trailHeads } = tables;

const BATCH = 2_000;

export type TrailVerdict =
  | { sound: true; entries: number; headHash: string }
  /** The first place at which the chain doesn't hold, and what is wrong there. */
  | { sound: false; entries: number; brokenAt: number; why: string };

/**
 * Computes a workshop's whole trail again from its first entry: every hash from the entry's own content, every link
 * to the entry before it, no gap in the numbers, and the head that the last append left.
 */
export async function verifyTrail(db: Database, workshopId: number): Promise<TrailVerdict> {
  // The head first: entries appended meanwhile come after it and are looked at up to it only.
  const [head] = await db.select().from(trailHeads).where(eq(trailHeads.workshopId, workshopId));
  if (!head) return { sound: false, entries: 0, brokenAt: 0, why: "The workshop has no trail head." };
  let previousHash = GENESIS_HASH;
  let sequence = 0;
  while (sequence < head.sequence) {
    const batch = await db
      .select()
      .from(auditEntries)
      .where(and(eq(auditEntries.workshopId, workshopId), gt(auditEntries.sequence, sequence)))
      .orderBy(asc(auditEntries.sequence))
      .limit(Math.min(BATCH, head.sequence - sequence));
    for (const { hash, ...entry } of batch) {
      const why = objection(entry.sequence, sequence + 1, { hash, ...entry }, previousHash);
      if (why !== null) return { sound: false, entries: sequence, brokenAt: sequence + 1, why };
      previousHash = hash;
      sequence = entry.sequence;
    }
    if (batch.length === 0) {
      return {
        sound: false,
        entries: sequence,
        brokenAt: sequence + 1,
        why: `The trail ends at entry ${sequence}, but its head says ${head.sequence}.`,
      };
    }
  }
  if (previousHash !== head.hash) {
    return {
      sound: false,
      entries: sequence,
      brokenAt: sequence,
      why: "The last entry is not the one that the head names.",
    };
  }
  return { sound: true, entries: sequence, headHash: previousHash };
}

type Entry = typeof auditEntries.$inferSelect;

function objection(
  found: number,
  expected: number,
  { hash, ...entry }: Entry,
  previousHash: string,
): string | null {
  if (found !== expected) return `Entry ${expected} is missing.`;
  if (entry.previousHash !== previousHash) return `Entry ${found} does not follow the entry before it.`;
  if (hashEntry(entry) !== hash) return `Entry ${found} is not what its hash says: it was altered.`;
  return null;
}
