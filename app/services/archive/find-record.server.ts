import { and, desc, eq } from "drizzle-orm";
import { tables } from "~/db/client.server";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { NotFoundError } from "~/services/errors";
import { parseRecord, sha256Of } from "~/services/records/canonical-record";
import type { UnitRecord } from "~/services/records/record-format";
import type { StandingUnit } from "~/services/unit-act.server";
import { validity, type Validity } from "~/workflow/states";

const { jobs, people, records, withdrawals } = tables;

export interface StoredRecord {
  record: UnitRecord;
  canonicalJson: string;
  sha256: string;
  /** Whether the stored bytes still give the stored hash: computed now. */
  intact: boolean;
  publicCode: string;
  madeAt: Date;
  validity: Validity;
  pdf: PdfState;
  withdrawal: { by: string; at: Date; reason: string } | null;
}

export type PdfState =
  | { ready: true; key: string; bytes: number; sha256: string; madeAt: Date }
  /** Still to be made; `tries` tells how often that failed so far. */
  | { ready: false; tries: number };

/** The latest record of a unit. @throws NotFoundError when it was never decided on */
export async function findRecord(
  { db, workshop, now }: Pick<ServiceContext, "db" | "workshop" | "now">,
  unit: StandingUnit,
): Promise<StoredRecord> {
  const [row] = await db
    .select({ record: records, withdrawal: withdrawals, withdrawnBy: people.name })
    .from(records)
    .leftJoin(withdrawals, eq(withdrawals.recordId, records.id))
    .leftJoin(people, eq(people.id, withdrawals.byId))
    .where(and(eq(records.workshopId, workshop.id), eq(records.unitId, unit.id)))
    .orderBy(desc(records.id))
    .limit(1);
  if (!row) throw new NotFoundError(`A record of unit ${unit.number}`);
  const { canonicalJson, sha256, publicCode, madeAt } = row.record;
  const record = parseRecord(canonicalJson);
  return {
    record,
    canonicalJson,
    sha256,
    intact: sha256Of(canonicalJson) === sha256,
    publicCode,
    madeAt,
    validity: validity(unit.state, record.decision.recheckOn, dayIn(workshop.timeZone, now())),
    pdf: await pdfState(db, row.record),
    withdrawal: row.withdrawal && {
      by: row.withdrawnBy ?? "",
      at: row.withdrawal.at,
      reason: row.withdrawal.reason,
    },
  };
}

async function pdfState(db: ServiceContext["db"], row: typeof records.$inferSelect): Promise<PdfState> {
  const { pdfKey, pdfBytes, pdfSha256, pdfMadeAt } = row;
  if (pdfKey !== null && pdfBytes !== null && pdfSha256 !== null && pdfMadeAt !== null) {
    return { ready: true, key: pdfKey, bytes: pdfBytes, sha256: pdfSha256, madeAt: pdfMadeAt };
  }
  const [job] = await db
    .select({ attempts: jobs.attempts })
    .from(jobs)
    .where(and(eq(jobs.kind, "make-record-pdf"), eq(jobs.subjectId, row.id)));
  return { ready: false, tries: job?.attempts ?? 0 };
}
