import { and, asc, count, desc, eq, gte, inArray, like, lt, or, type SQL } from "drizzle-orm";
import { alias } from "drizzle-orm/mysql-core";
import { tables } from "~/db/client.server";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { pageWithin } from "~/services/page-within";
import { archivedStates, type UnitState, validity, type Validity } from "~/workflow/states";
import type { Standing } from "./standing.server";
import { addDays, nextDay, startOfDay } from "./day-range";

const { decisions, people, records, units } = tables;
const builders = alias(people, "builders");
const signers = alias(people, "signers");

/** States to search by: the stored ones, and for signed units those that follow from the recheck date. */
export const recordStates = [
  "signed",
  "may-be-used",
  "recheck-due",
  "lapsed",
  "refused",
  "withdrawn",
  "superseded",
] as const;
export type RecordState = (typeof recordStates)[number];

export const recordSorts = ["decided", "number", "name", "recheck"] as const;
export type RecordSort = (typeof recordSorts)[number];

export interface RecordSearch {
  /** In the unit's name, purpose or place, the names of builder and signer, the number, or the start of a hash. */
  text: string;
  state: RecordState | null;
  builderId: number | null;
  signerId: number | null;
  /** Days of the decision, in the workshop's calendar, both included. */
  from: string | null;
  to: string | null;
  sort: { by: RecordSort; direction: "asc" | "desc" };
  /** From 1. */
  page: number;
  pageSize: number;
}

export interface RecordRow {
  unitNumber: number;
  unitName: string;
  state: UnitState;
  validity: Validity;
  standing: Standing;
  kind: "signed" | "refused";
  builder: string;
  signer: string;
  decidedAt: Date;
  recheckOn: string | null;
  publicCode: string;
  hasPdf: boolean;
}

/** One page of the archive of a workshop, with the number of all that match. A page beyond the last is the last. */
export async function searchRecords(
  { db, workshop, now }: ServiceContext,
  search: RecordSearch,
): Promise<{ rows: RecordRow[]; total: number; page: number }> {
  const today = dayIn(workshop.timeZone, now());
  const where = and(
    eq(records.workshopId, workshop.id),
    inArray(units.state, [...archivedStates]),
    textCondition(search.text),
    stateCondition(search.state, today),
    search.builderId === null ? undefined : eq(units.builderId, search.builderId),
    search.signerId === null ? undefined : eq(decisions.signerId, search.signerId),
    search.from === null ? undefined : gte(decisions.decidedAt, startOfDay(workshop.timeZone, search.from)),
    search.to === null
      ? undefined
      : lt(decisions.decidedAt, startOfDay(workshop.timeZone, nextDay(search.to))),
  );
  const direction = search.sort.direction === "asc" ? asc : desc;
  const [counted] = await db
    .select({ total: count() })
    .from(records)
    .innerJoin(decisions, eq(decisions.id, records.decisionId))
    .innerJoin(units, eq(units.id, records.unitId))
    .innerJoin(builders, eq(builders.id, units.builderId))
    .innerJoin(signers, eq(signers.id, decisions.signerId))
    .where(where);
  const total = counted?.total ?? 0;
  const page = pageWithin(search.page, total, search.pageSize);
  const rows = await db
    .select({
      unitNumber: units.number,
      unitName: units.name,
      state: units.state,
      kind: decisions.kind,
      builder: builders.name,
      signer: signers.name,
      decidedAt: decisions.decidedAt,
      recheckOn: decisions.recheckOn,
      departures: decisions.departures,
      publicCode: records.publicCode,
      pdfKey: records.pdfKey,
    })
    .from(records)
    .innerJoin(decisions, eq(decisions.id, records.decisionId))
    .innerJoin(units, eq(units.id, records.unitId))
    .innerJoin(builders, eq(builders.id, units.builderId))
    .innerJoin(signers, eq(signers.id, decisions.signerId))
    .where(where)
    // The id last, so that rows of one moment keep their order from page to page.
    .orderBy(direction(sortColumns[search.sort.by]), desc(records.id))
    .limit(search.pageSize)
    .offset((page - 1) * search.pageSize);
  return {
    rows: rows.map(({ pdfKey, departures, ...row }) => {
      const now = validity(row.state, row.recheckOn, today);
      return {
        ...row,
        validity: now,
        standing: { validity: now.kind, departures: departures !== null },
        hasPdf: pdfKey !== null,
      };
    }),
    total,
    page,
  };
}

const sortColumns = {
  decided: decisions.decidedAt,
  number: units.number,
  name: units.name,
  recheck: decisions.recheckOn,
} as const;

function textCondition(text: string): SQL | undefined {
  const words = text.trim();
  if (words === "") return undefined;
  const anywhere = `%${words.replace(/[\\%_]/g, "\\$&")}%`;
  return or(
    like(units.name, anywhere),
    like(units.purpose, anywhere),
    like(units.placeOfUse, anywhere),
    like(builders.name, anywhere),
    like(signers.name, anywhere),
    /^\d{1,9}$/.test(words) ? eq(units.number, Number(words)) : undefined,
    /^[0-9a-f]{8,64}$/i.test(words) ? like(records.sha256, `${words.toLowerCase()}%`) : undefined,
  );
}

/** The same borders as {@link validity} draws; a test holds the two together. */
function stateCondition(state: RecordState | null, today: string): SQL | undefined {
  if (state === null) return undefined;
  if (state === "refused" || state === "withdrawn" || state === "superseded") return eq(units.state, state);
  const signed = eq(units.state, "signed");
  const dueFrom = addDays(today, 30);
  switch (state) {
    case "signed":
      return signed;
    case "lapsed":
      return and(signed, lt(decisions.recheckOn, today));
    case "recheck-due":
      return and(signed, gte(decisions.recheckOn, today), lt(decisions.recheckOn, nextDay(dueFrom)));
    case "may-be-used":
      return and(signed, gte(decisions.recheckOn, nextDay(dueFrom)));
  }
}

export interface PersonChoice {
  id: number;
  name: string;
}

/** Who built and who decided what is in the archive, for the filters. */
export async function listArchivePeople({
  db,
  workshop,
}: ServiceContext): Promise<{ builders: PersonChoice[]; signers: PersonChoice[] }> {
  const [built, decided] = await Promise.all([
    db
      .selectDistinct({ id: builders.id, name: builders.name })
      .from(records)
      .innerJoin(units, eq(units.id, records.unitId))
      .innerJoin(builders, eq(builders.id, units.builderId))
      .where(eq(records.workshopId, workshop.id))
      .orderBy(asc(builders.name)),
    db
      .selectDistinct({ id: signers.id, name: signers.name })
      .from(records)
      .innerJoin(decisions, eq(decisions.id, records.decisionId))
      .innerJoin(signers, eq(signers.id, decisions.signerId))
      .where(eq(records.workshopId, workshop.id))
      .orderBy(asc(signers.name)),
  ]);
  return { builders: built, signers: decided };
}
