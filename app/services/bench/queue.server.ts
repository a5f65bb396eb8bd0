import { and, asc, count, desc, eq, like, or, sql, type SQL } from "drizzle-orm";
import { alias } from "drizzle-orm/mysql-core";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { listFiles } from "~/services/files/list-files.server";
import { pageWithin } from "~/services/page-within";
import { loadCurrentRevisions } from "~/services/units/load-revision.server";
import type { UnitState } from "~/workflow/states";
import { buildSheet } from "./load-sheet.server";
import { listObservations } from "./observations.server";
import type { SheetProgress } from "./sheet-view";

const { people, revisions, units } = tables;

/** States that the bench's queue can be filtered by. */
const benchStates = [
  "submitted",
  "on_bench",
  "awaiting_signature",
  "sent_back",
] as const satisfies UnitState[];
export type BenchState = (typeof benchStates)[number];

export const queueSorts = ["number", "name", "builder", "since", "revision", "supply"] as const;
export type QueueSort = (typeof queueSorts)[number];

export interface QueueFilter {
  state: BenchState | "all";
  /** In the unit's name, or its builder's; or the unit's number. */
  text: string;
  battery: "any" | "yes" | "no";
  sort: { by: QueueSort; direction: "asc" | "desc" };
  page: number;
  pageSize: number;
}

export interface QueueRow {
  number: number;
  name: string;
  state: UnitState;
  revision: number;
  version: number;
  builder: string;
  /** The signed-in person built it, so somebody else must inspect it. */
  isOwn: boolean;
  inspector: string | null;
  /** When the revision was submitted. */
  since: Date | null;
  supplyVolts: number;
  supplyHertz: number;
  protectionClass: "I" | "II";
  hasBattery: boolean;
}

const hasBattery = sql<number>`json_search(${revisions.map}, 'one', 'battery', null, '$.elements[*].kind') is not null`;

/**
 * The units that the bench has to do with, filtered, in the order asked for, page by page. A page beyond the last one
 * is the last one.
 */
export async function loadQueue(
  { db, workshop, person }: ServiceContext,
  filter: QueueFilter,
): Promise<{ rows: QueueRow[]; total: number; page: number }> {
  const inspector = alias(people, "inspector");
  const conditions: (SQL | undefined)[] = [eq(units.workshopId, workshop.id)];
  conditions.push(
    filter.state === "all" ? sql`${units.state} in ${[...benchStates]}` : eq(units.state, filter.state),
  );
  const text = filter.text.trim();
  if (text !== "") {
    const pattern = `%${text.replace(/[\\%_]/g, "\\$&")}%`;
    const number = /^\d{1,9}$/.test(text) ? Number(text) : null;
    conditions.push(
      or(
        like(units.name, pattern),
        like(people.name, pattern),
        number === null ? undefined : eq(units.number, number),
      ),
    );
  }
  if (filter.battery !== "any")
    conditions.push(filter.battery === "yes" ? hasBattery : sql`not ${hasBattery}`);

  const order = {
    number: units.number,
    name: units.name,
    builder: people.name,
    since: revisions.submittedAt,
    revision: units.revision,
    supply: units.supplyVolts,
  }[filter.sort.by];
  const direction = filter.sort.direction === "asc" ? asc : desc;

  const [all] = await db
    .select({ total: count() })
    .from(units)
    .innerJoin(people, eq(people.id, units.builderId))
    .innerJoin(revisions, and(eq(revisions.unitId, units.id), eq(revisions.number, units.revision)))
    .where(and(...conditions));
  const total = all?.total ?? 0;
  const page = pageWithin(filter.page, total, filter.pageSize);
  const rows = await db
    .select({
      unit: units,
      builder: people.name,
      inspector: inspector.name,
      since: revisions.submittedAt,
      hasBattery: hasBattery.mapWith(Boolean),
    })
    .from(units)
    .innerJoin(people, eq(people.id, units.builderId))
    .innerJoin(revisions, and(eq(revisions.unitId, units.id), eq(revisions.number, units.revision)))
    .leftJoin(inspector, eq(inspector.id, units.inspectorId))
    .where(and(...conditions))
    .orderBy(direction(order), asc(units.number))
    .limit(filter.pageSize)
    .offset((page - 1) * filter.pageSize);
  return {
    total,
    page,
    rows: rows.map(({ unit, ...row }) => ({
      number: unit.number,
      name: unit.name,
      state: unit.state,
      revision: unit.revision,
      version: unit.version,
      builder: row.builder,
      isOwn: unit.builderId === person.id,
      inspector: row.inspector,
      since: row.since,
      supplyVolts: unit.supplyVolts,
      supplyHertz: unit.supplyHertz,
      protectionClass: unit.protectionClass,
      hasBattery: row.hasBattery,
    })),
  };
}

export interface OwnBenchUnit {
  number: number;
  name: string;
  revision: number;
  version: number;
  progress: SheetProgress;
}

/** The units that the person has on the bench now, with how far each sheet is: as many queries for many as for one. */
export async function listOwnBench({ db, workshop, person }: ServiceContext): Promise<OwnBenchUnit[]> {
  const own = await db
    .select()
    .from(units)
    .where(
      and(eq(units.workshopId, workshop.id), eq(units.state, "on_bench"), eq(units.inspectorId, person.id)),
    )
    .orderBy(asc(units.changedAt));
  if (own.length === 0) return [];
  const ids = own.map(({ id }) => id);
  const [current, observations, files] = await Promise.all([
    loadCurrentRevisions(db, own),
    listObservations(db, ids),
    listFiles(db, ids, { subject: "check" }),
  ]);
  return own.flatMap((unit) => {
    const revision = current.get(unit.id);
    if (!revision) return [];
    const photos = files.filter((file) => file.unitId === unit.id);
    const { progress } = buildSheet(revision, observations, photos, [], workshop.accuracyPolicy);
    const { number, name, version } = unit;
    return [{ number, name, revision: revision.number, version, progress }];
  });
}
