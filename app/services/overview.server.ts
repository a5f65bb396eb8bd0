import { and, asc, desc, eq, gte, inArray, isNull, lte, or, type SQL } from "drizzle-orm";
import { tables } from "~/db/client.server";
import { type Standing, standingsOf } from "~/services/archive/standing.server";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { type UnitState } from "~/workflow/states";

const { instruments, licences, people, units } = tables;

const NOTICE_DAYS = 30;
const DAY_MS = 86_400_000;

export interface OverviewUnit {
  number: number;
  name: string;
  state: UnitState;
  revision: number;
  builder: string;
  changedAt: Date;
  /** Null for one that isn't signed. */
  standing: Standing | null;
}

/** Units of the workshop as the overview lists them, those changed last first. */
async function selectUnits(
  { db, workshop, now }: ServiceContext,
  condition: SQL | undefined,
  limit: number,
): Promise<OverviewUnit[]> {
  const rows = await db
    .select({
      id: units.id,
      number: units.number,
      name: units.name,
      state: units.state,
      revision: units.revision,
      builder: people.name,
      changedAt: units.changedAt,
    })
    .from(units)
    .innerJoin(people, eq(people.id, units.builderId))
    .where(and(eq(units.workshopId, workshop.id), isNull(units.discardedAt), condition))
    .orderBy(desc(units.changedAt), desc(units.id))
    .limit(limit);
  const standings = await standingsOf(db, rows, dayIn(workshop.timeZone, now()));
  return rows.map(({ id, ...row }) => ({ ...row, standing: standings.get(id) ?? null }));
}

/**
 * What nobody but this person can move on: their units that are drafts or were sent back, and those that they have on
 * the bench.
 */
export function unitsInHand(context: ServiceContext): Promise<OverviewUnit[]> {
  const { person } = context;
  return selectUnits(
    context,
    or(
      and(eq(units.builderId, person.id), inArray(units.state, ["sent_back", "draft"])),
      and(eq(units.inspectorId, person.id), eq(units.state, "on_bench")),
    ),
    20,
  );
}

/** The units of the workshop that changed last. */
export function recentUnits(context: ServiceContext): Promise<OverviewUnit[]> {
  return selectUnits(context, undefined, 8);
}

export interface Expiry {
  kind: "licence" | "instrument";
  name: string;
  day: string;
  over: boolean;
}

/**
 * Licences that end within 30 days or ended in the last 30, and calibrations that end within 30 days or are over, the
 * earliest first.
 */
export async function expiries({ db, workshop, now }: ServiceContext): Promise<Expiry[]> {
  const day = (offset: number) => dayIn(workshop.timeZone, new Date(now().getTime() + offset * DAY_MS));
  const [from, today, to] = [day(-NOTICE_DAYS), day(0), day(NOTICE_DAYS)];
  const licenceRows = await db
    .select({ name: people.name, day: licences.validTo })
    .from(licences)
    .innerJoin(people, eq(people.id, licences.personId))
    .where(
      and(
        eq(licences.workshopId, workshop.id),
        isNull(licences.revokedAt),
        gte(licences.validTo, from),
        lte(licences.validTo, to),
      ),
    )
    .orderBy(asc(licences.validTo))
    .limit(50);
  // A calibration is told of until somebody renews it or retires the instrument.
  const instrumentRows = await db
    .select({ name: instruments.name, day: instruments.calibrationDue })
    .from(instruments)
    .where(
      and(
        eq(instruments.workshopId, workshop.id),
        isNull(instruments.retiredAt),
        lte(instruments.calibrationDue, to),
      ),
    )
    .orderBy(asc(instruments.calibrationDue))
    .limit(50);
  return [
    ...licenceRows.map((row) => ({ kind: "licence" as const, ...row })),
    ...instrumentRows.map((row) => ({ kind: "instrument" as const, ...row })),
  ]
    .map((row) => ({ ...row, over: row.day < today }))
    .sort((a, b) => a.day.localeCompare(b.day));
}
