import { sql } from "drizzle-orm";
import {
  check,
  date,
  double,
  foreignKey,
  index,
  json,
  mysqlEnum,
  mysqlTable,
  text,
  unique,
  varchar,
} from "drizzle-orm/mysql-core";
import { checkKeyColumn, id, moment, ref } from "./columns";
import { people, workshops } from "./people";
import { revisions, units } from "./units";

export const instruments = mysqlTable(
  "instruments",
  {
    id: id(),
    workshopId: ref()
      .notNull()
      .references(() => workshops.id),
    name: varchar({ length: 120 }).notNull(),
    /** An InstrumentKind of engine/check.ts, parsed by zod where it is read. */
    kind: varchar({ length: 60 }).notNull(),
    serial: varchar({ length: 80 }).notNull(),
    calibratedOn: date({ mode: "string" }).notNull(),
    calibrationDue: date({ mode: "string" }).notNull(),
    certificate: varchar({ length: 120 }).notNull(),
    retiredAt: moment(),
  },
  (table) => [
    unique("instruments_serial").on(table.workshopId, table.serial),
    check("instruments_calibration", sql`calibration_due >= calibrated_on`),
  ],
);

/** Accuracy "± (percent of reading + digits)" of an instrument within one measuring range. */
export const instrumentRanges = mysqlTable(
  "instrument_ranges",
  {
    id: id(),
    instrumentId: ref()
      .notNull()
      .references(() => instruments.id),
    unit: varchar({ length: 20 }).notNull(),
    lower: double().notNull(),
    upper: double().notNull(),
    percent: double().notNull(),
    digits: double().notNull(),
    resolution: double().notNull(),
  },
  (table) => [
    index("instrument_ranges_by_instrument").on(table.instrumentId),
    check("instrument_ranges_order", sql`upper > lower and percent >= 0 and digits >= 0 and resolution > 0`),
  ],
);

export const observationKinds = [
  "measured",
  "examined",
  "not-applicable",
  "not-possible",
  "carried-over",
] as const;

/**
 * What an inspector found for one check: a reading, an examination's answer, a reasoned "not applicable" or
 * "not possible", or an earlier observation carried over by the inspector's own act. Rows are never changed:
 * a correction is a new row that names the one it corrects, with a reason.
 */
export const observations = mysqlTable(
  "observations",
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    revisionId: ref()
      .notNull()
      .references(() => revisions.id),
    checkKey: checkKeyColumn().notNull(),
    kind: mysqlEnum(observationKinds).notNull(),
    /** The value displayed, for "measured"; `bound` tells that the display read over or under its range. */
    value: double(),
    bound: mysqlEnum(["over", "under"]),
    unit: varchar({ length: 20 }),
    instrumentId: ref().references(() => instruments.id),
    /** The instrument's accuracy at that value (in `unit`) as it was stated on the day; null outside every range. */
    accuracy: json().$type<unknown>(),
    /** Until when the instrument was in calibration on the day of the reading. */
    calibrationDue: date({ mode: "string" }),
    /** How it was measured: test voltage, polarity, switch position. */
    conditions: varchar({ length: 500 }).notNull().default(""),
    /** The answer, for "examined". */
    conforms: mysqlEnum(["yes", "no"]),
    /** Why, for "not-applicable", "not-possible", and for every correction. */
    reason: varchar({ length: 1000 }),
    correctsId: ref(),
    carriedFromId: ref(),
    byId: ref()
      .notNull()
      .references(() => people.id),
    at: moment().notNull(),
    note: text(),
  },
  (table) => [
    index("observations_by_check").on(table.revisionId, table.checkKey, table.id),
    index("observations_by_unit").on(table.unitId),
    index("observations_by_instrument").on(table.instrumentId),
    foreignKey({ name: "observations_corrects", columns: [table.correctsId], foreignColumns: [table.id] }),
    foreignKey({
      name: "observations_carried_from",
      columns: [table.carriedFromId],
      foreignColumns: [table.id],
    }),
    unique("observations_corrected_once").on(table.correctsId),
    check(
      "observations_shape",
      sql`(kind <> 'measured' or (value is not null and unit is not null and instrument_id is not null
          and calibration_due is not null))
        and (kind <> 'examined' or conforms is not null)
        and (kind not in ('not-applicable', 'not-possible') or reason is not null)
        and (kind <> 'carried-over' or carried_from_id is not null)
        and (corrects_id is null or reason is not null)`,
    ),
  ],
);
