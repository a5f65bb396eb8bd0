import { desc, eq } from "drizzle-orm";
import { type Database, tables } from "~/db/client.server";
import type { SigningConditions } from "~/db/schema/decisions";
import { dayIn } from "~/services/context.server";
import { recordCautions } from "~/services/records/record-format";
import { type UnitState, validity, type Validity } from "~/workflow/states";

const { decisions, records, units, withdrawals, workshops } = tables;

/** What anybody may see who scans a unit's code: how it stands and under which conditions. No person is named. */
export interface PublicRecord {
  unitNumber: number;
  unitName: string;
  workshopName: string;
  demo: boolean;
  state: UnitState;
  validity: Validity;
  /** Null as well when it must not be used: there is nothing that they would allow. */
  conditions: SigningConditions | null;
  /** It was signed although a check fails. The reasons are the workshop's. */
  departures: boolean;
  /** The day of the decision, in the workshop's calendar. */
  decidedOn: string;
  /** The day of the withdrawal, in the workshop's calendar; null when it was not withdrawn. */
  withdrawnOn: string | null;
  cautions: readonly string[];
}

/** The public face of the record behind a code; null when there is none. */
export async function findPublicRecord(db: Database, code: string, now: Date): Promise<PublicRecord | null> {
  if (!/^[a-z0-9]{8,32}$/.test(code)) return null;
  const [row] = await db
    .select({
      recordId: records.id,
      unitId: units.id,
      unitNumber: units.number,
      unitName: units.name,
      state: units.state,
      workshopName: workshops.name,
      demo: workshops.isDemo,
      timeZone: workshops.timeZone,
      conditions: decisions.conditions,
      departures: decisions.departures,
      recheckOn: decisions.recheckOn,
      decidedAt: decisions.decidedAt,
      withdrawnAt: withdrawals.at,
    })
    .from(records)
    .innerJoin(decisions, eq(decisions.id, records.decisionId))
    .innerJoin(units, eq(units.id, records.unitId))
    .innerJoin(workshops, eq(workshops.id, records.workshopId))
    .leftJoin(withdrawals, eq(withdrawals.recordId, records.id))
    .where(eq(records.publicCode, code));
  if (!row) return null;
  const [latest] = await db
    .select({ id: records.id })
    .from(records)
    .where(eq(records.unitId, row.unitId))
    .orderBy(desc(records.id))
    .limit(1);
  const { recordId, unitId: _, timeZone, recheckOn, decidedAt, withdrawnAt, ...shown } = row;
  // An earlier record of a unit that was decided on again says nothing about it any more.
  const state = latest?.id === recordId ? row.state : "superseded";
  const stands = validity(state, recheckOn, dayIn(timeZone, now));
  return {
    ...shown,
    conditions: mayBeUsed(stands) ? shown.conditions : null,
    departures: shown.departures !== null,
    state,
    validity: stands,
    decidedOn: dayIn(timeZone, decidedAt),
    withdrawnOn: withdrawnAt && dayIn(timeZone, withdrawnAt),
    cautions: recordCautions,
  };
}

function mayBeUsed({ kind }: Validity): boolean {
  return kind === "may-be-used" || kind === "recheck-due";
}
