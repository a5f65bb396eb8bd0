import { and, eq, isNull, lte, or, sql } from "drizzle-orm";
import { type Database, inTransaction, tables, type Transaction } from "~/db/client.server";
import type { jobKinds } from "~/db/schema/delivery";
import { makeRecordPdf } from "~/services/pdf/make-record-pdf.server";

const { jobs } = tables;

type JobKind = (typeof jobKinds)[number];

const LEASE_MS = 120_000;
const LONGEST_WAIT_MS = 600_000;

const runners: Record<JobKind, (db: Database, subjectId: number, now: () => Date) => Promise<void>> = {
  "make-record-pdf": makeRecordPdf,
};

/** Queues a job within the transaction that makes it necessary. */
export async function enqueueJob(tx: Transaction, kind: JobKind, subjectId: number, at: Date): Promise<void> {
  await tx.insert(jobs).values({ kind, subjectId, createdAt: at, dueAt: at });
}

/** Runs the jobs that are due, one after another; returns how many were finished. A failed one waits and is tried again. */
export async function runDueJobs(db: Database, now: () => Date): Promise<number> {
  let done = 0;
  for (let job = await leaseOne(db, now()); job; job = await leaseOne(db, now())) {
    try {
      await runners[job.kind](db, job.subjectId, now);
      await db
        .update(jobs)
        .set({ doneAt: now(), lockedUntil: null, lastError: null })
        .where(eq(jobs.id, job.id));
      done++;
    } catch (error) {
      console.error(`Job ${job.id} (${job.kind}) failed and will be tried again:`, error);
      const wait = Math.min(LONGEST_WAIT_MS, 2_000 * 2 ** job.attempts);
      await db
        .update(jobs)
        .set({
          attempts: sql`${jobs.attempts} + 1`,
          dueAt: new Date(now().getTime() + wait),
          lockedUntil: null,
          lastError: String(error).slice(0, 500),
        })
        .where(eq(jobs.id, job.id));
    }
  }
  return done;
}

function leaseOne(db: Database, now: Date) {
  return inTransaction(db, async (tx) => {
    const [job] = await tx
      .select()
      .from(jobs)
      .where(
        and(
          isNull(jobs.doneAt),
          lte(jobs.dueAt, now),
          or(isNull(jobs.lockedUntil), lte(jobs.lockedUntil, now)),
        ),
      )
      .orderBy(jobs.id)
      .limit(1)
      .for("update", { skipLocked: true });
    if (job) {
      await tx
        .update(jobs)
        .set({ lockedUntil: new Date(now.getTime() + LEASE_MS) })
        .where(eq(jobs.id, job.id));
    }
    return job;
  });
}
