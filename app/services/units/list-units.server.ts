import { and, asc, count, desc, eq, isNull, like, or, type SQL } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import { type Standing, standingsOf } from "~/services/archive/standing.server";
import { pageWithin } from "~/services/page-within";
import type { UnitState } from "~/workflow/states";
import type { UnitSortColumn } from "./unit-sort";

const { people, units } = tables;

export const UNITS_PER_PAGE = 25;

export interface UnitQuery {
  workshopId: number;
  /** YYYY-MM-DD in the workshop's time zone: signatures are told as they stand then. */
  today: string;
  /** Found in name, purpose or place; a number finds the unit of that number too. */
  text?: string;
  states?: readonly UnitState[];
  builderId?: number;
  sort: { by: UnitSortColumn; direction: "asc" | "desc" };
  /** From 1. */
  page: number;
}

export interface UnitListItem {
  number: number;
  name: string;
  purpose: string;
  state: UnitState;
  revision: number;
  builder: string;
  builderId: number;
  protectionClass: "I" | "II";
  supplyVolts: number;
  changedAt: Date;
  /** Null for one that isn't signed. */
  standing: Standing | null;
}

/** One page of a workshop's units, with how many there are in all. A page beyond the last one is the last one. */
export async function listUnits(
  db: Reader,
  query: UnitQuery,
): Promise<{ units: UnitListItem[]; total: number; page: number }> {
  const where = conditionsOf(query);
  const [found] = await db.select({ total: count() }).from(units).where(where);
  const total = found?.total ?? 0;
  const page = pageWithin(query.page, total, UNITS_PER_PAGE);
  const order = query.sort.direction === "asc" ? asc : desc;
  const rows = await db
    .select({
      id: units.id,
      number: units.number,
      name: units.name,
      purpose: units.purpose,
      state: units.state,
      revision: units.revision,
      builder: people.name,
      builderId: units.builderId,
      protectionClass: units.protectionClass,
      supplyVolts: units.supplyVolts,
      changedAt: units.changedAt,
    })
    .from(units)
    .innerJoin(people, eq(people.id, units.builderId))
    .where(where)
    .orderBy(order(sortColumns[query.sort.by]), desc(units.number))
    .limit(UNITS_PER_PAGE)
    .offset((page - 1) * UNITS_PER_PAGE);
  const standings = await standingsOf(db, rows, query.today);
  return {
    units: rows.map(({ id, ...row }) => ({ ...row, standing: standings.get(id) ?? null })),
    total,
    page,
  };
}

const sortColumns = {
  number: units.number,
  name: units.name,
  state: units.state,
  builder: people.name,
  changed: units.changedAt,
};

function conditionsOf(query: UnitQuery): SQL | undefined {
  const conditions: (SQL | undefined)[] = [eq(units.workshopId, query.workshopId), isNull(units.discardedAt)];
  const text = query.text?.trim();
  if (text) {
    const pattern = `%${text.replace(/[\\%_]/g, (sign) => `\\${sign}`)}%`;
    const number = /^#?\d{1,9}$/.test(text) ? Number(text.replace("#", "")) : null;
    conditions.push(
      or(
        like(units.name, pattern),
        like(units.purpose, pattern),
        like(units.placeOfUse, pattern),
        ...(number === null ? [] : [eq(units.number, number)]),
      ),
    );
  }
  if (query.states && query.states.length > 0) {
    conditions.push(or(...query.states.map((state) => eq(units.state, state))));
  }
  if (query.builderId !== undefined) conditions.push(eq(units.builderId, query.builderId));
  return and(...conditions);
}
