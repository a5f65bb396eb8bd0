import { char, index, int, json, mysqlEnum, mysqlTable, primaryKey, varchar } from "drizzle-orm/mysql-core";
import { unitStates } from "~/workflow/states";
import { moment, ref } from "./columns";
import { people, workshops } from "./people";
import { units } from "./units";

/** The head of each workshop's trail; its row lock orders the appends. */
export const trailHeads = mysqlTable("trail_heads", {
  workshopId: ref()
    .primaryKey()
    .references(() => workshops.id),
  sequence: int({ unsigned: true }).notNull(),
  hash: char({ length: 64 }).notNull(),
});

/** Append-only: the application's database user may only select and insert here. */
export const auditEntries = mysqlTable(
  "audit_entries",
  {
    workshopId: ref()
      .notNull()
      .references(() => workshops.id),
    /** 1, 2, 3 … within the workshop. */
    sequence: int({ unsigned: true }).notNull(),
    at: moment().notNull(),
    actorId: ref().references(() => people.id),
    /** What was done, e.g. "unit.submit": an act of services/audit/acts.ts. */
    act: varchar({ length: 60 }).notNull(),
    unitId: ref().references(() => units.id),
    fromState: mysqlEnum(unitStates),
    toState: mysqlEnum(unitStates),
    detail: json().$type<Record<string, unknown>>().notNull(),
    /** Hash of the entry before it, or 64 zeros for the first. */
    previousHash: char({ length: 64 }).notNull(),
    /** SHA-256 over the canonical JSON of all other columns. */
    hash: char({ length: 64 }).notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.workshopId, table.sequence] }),
    index("audit_entries_by_unit").on(table.unitId, table.sequence),
  ],
);
