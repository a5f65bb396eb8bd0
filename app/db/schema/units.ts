import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  double,
  foreignKey,
  index,
  int,
  json,
  mysqlEnum,
  mysqlTable,
  primaryKey,
  text,
  unique,
  varchar,
} from "drizzle-orm/mysql-core";
import { unitStates } from "~/workflow/states";
import { checkKeyColumn, id, moment, ref } from "./columns";
import { accuracyPolicies, people, workshops } from "./people";

export const units = mysqlTable(
  "units",
  {
    id: id(),
    workshopId: ref()
      .notNull()
      .references(() => workshops.id),
    /** Counts up within the workshop; the number in links and on labels. */
    number: int({ unsigned: true }).notNull(),
    name: varchar({ length: 120 }).notNull(),
    purpose: varchar({ length: 1000 }).notNull(),
    placeOfUse: varchar({ length: 300 }).notNull(),
    supplyVolts: double().notNull(),
    supplyHertz: double().notNull(),
    protectionClass: mysqlEnum(["I", "II"]).notNull(),
    /** Null in these four: not known. */
    cordLengthM: double(),
    cordAreaMm2: double(),
    handheld: boolean(),
    altitudeM: double(),
    builderId: ref()
      .notNull()
      .references(() => people.id),
    /** The unit that this one is a new version of. */
    predecessorId: ref(),
    state: mysqlEnum(unitStates).notNull(),
    /** Number of the revision being drafted or examined. */
    revision: int({ unsigned: true }).notNull(),
    /** Who has it on the bench, or had it there when the sheet was finished. */
    inspectorId: ref().references(() => people.id),
    /** Optimistic lock: every change adds one and checks the row count. */
    version: int({ unsigned: true }).notNull(),
    createdAt: moment().notNull(),
    changedAt: moment().notNull(),
    /** Set when a draft that was never submitted is thrown away; the trail keeps its row. */
    discardedAt: moment(),
  },
  (table) => [
    unique("units_number").on(table.workshopId, table.number),
    index("units_by_state").on(table.workshopId, table.state, table.changedAt),
    index("units_by_change").on(table.workshopId, table.changedAt),
    index("units_by_builder").on(table.workshopId, table.builderId, table.changedAt),
    foreignKey({ name: "units_predecessor", columns: [table.predecessorId], foreignColumns: [table.id] }),
    check("units_supply", sql`supply_volts > 0 and supply_hertz >= 0`),
  ],
);

/** One revision of a unit: the map as drafted, frozen from its submission on. */
export const revisions = mysqlTable(
  "revisions",
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    number: int({ unsigned: true }).notNull(),
    /** An EnergyMap of engine/energy-map.ts; parsed by zod wherever it is read. */
    map: json().$type<unknown>().notNull(),
    /** Counts the saves of the draft: an editor open elsewhere is told apart by it. */
    mapEdition: int({ unsigned: true }).notNull().default(1),
    /** The UnitFacts of engine/unit-facts.ts as submitted; null while the revision is a draft. */
    facts: json().$type<unknown>(),
    ruleSetKey: varchar({ length: 60 }).notNull(),
    ruleSetVersion: varchar({ length: 20 }).notNull(),
    /** How accuracies become uncertainties on this revision, pinned at its submission; null while it is a draft. */
    accuracyPolicy: mysqlEnum(accuracyPolicies),
    createdAt: moment().notNull(),
    submittedAt: moment(),
    /** Why the revision before this one was sent back, and by whom; null for a unit's first. */
    sentBackReason: text(),
    sentBackById: ref().references(() => people.id),
  },
  (table) => [unique("revisions_number").on(table.unitId, table.number)],
);

/** Everybody who ever took a unit on the bench: the four-eyes rule reads this. */
export const benchTurns = mysqlTable(
  "bench_turns",
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    revisionId: ref()
      .notNull()
      .references(() => revisions.id),
    inspectorId: ref()
      .notNull()
      .references(() => people.id),
    takenAt: moment().notNull(),
    endedAt: moment(),
    /** Who ended it for an inspector who was absent, and why; null when the inspector ended it. */
    reclaimedById: ref().references(() => people.id),
    reclaimReason: varchar({ length: 1000 }),
  },
  (table) => [
    index("bench_turns_by_unit").on(table.unitId, table.takenAt),
    check("bench_turns_reclaim", sql`(reclaimed_by_id is null) = (reclaim_reason is null)`),
  ],
);

/** Everybody who built on a unit before it was handed to another builder: the four-eyes rule reads this too. */
export const formerBuilders = mysqlTable(
  "former_builders",
  {
    unitId: ref()
      .notNull()
      .references(() => units.id),
    personId: ref()
      .notNull()
      .references(() => people.id),
    /** The steward who handed it on. */
    handedOnById: ref()
      .notNull()
      .references(() => people.id),
    handedOnAt: moment().notNull(),
  },
  (table) => [primaryKey({ columns: [table.unitId, table.personId] })],
);

export const fileSubjects = ["unit", "check", "finding", "answer"] as const;

/** Photos and drawings. The bytes are in S3 under `storageKey` (and `thumbKey` for photos). */
export const files = mysqlTable(
  "files",
  {
    id: id(),
    workshopId: ref()
      .notNull()
      .references(() => workshops.id),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    revisionId: ref()
      .notNull()
      .references(() => revisions.id),
    kind: mysqlEnum(["photo", "drawing"]).notNull(),
    subject: mysqlEnum(fileSubjects).notNull(),
    /** The check's key when the subject is a check. */
    checkKey: checkKeyColumn(),
    findingId: ref().references(() => findings.id),
    contentType: varchar({ length: 60 }).notNull(),
    bytes: int({ unsigned: true }).notNull(),
    width: int({ unsigned: true }),
    height: int({ unsigned: true }),
    sha256: varchar({ length: 64 }).notNull(),
    storageKey: varchar({ length: 190 }).notNull().unique(),
    thumbKey: varchar({ length: 190 }),
    originalName: varchar({ length: 200 }).notNull(),
    caption: varchar({ length: 300 }).notNull().default(""),
    addedById: ref()
      .notNull()
      .references(() => people.id),
    addedAt: moment().notNull(),
    /** Set when taken back before the revision was decided; the row stays. */
    removedAt: moment(),
  },
  (table) => [index("files_by_unit").on(table.unitId, table.subject, table.checkKey)],
);

export const severities = ["danger", "defect", "advice"] as const;

export const findings = mysqlTable(
  "findings",
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    /** Revision on which it was raised. */
    revisionId: ref()
      .notNull()
      .references(() => revisions.id),
    /** Counts up within the unit: "Finding 3". */
    number: int({ unsigned: true }).notNull(),
    severity: mysqlEnum(severities).notNull(),
    checkKey: checkKeyColumn(),
    elementId: varchar({ length: 40 }),
    text: text().notNull(),
    raisedById: ref()
      .notNull()
      .references(() => people.id),
    raisedAt: moment().notNull(),
    closedById: ref().references(() => people.id),
    closedAt: moment(),
    closingText: text(),
  },
  (table) => [
    unique("findings_number").on(table.unitId, table.number),
    check("findings_closing", sql`(closed_at is null) = (closed_by_id is null)`),
  ],
);

/** The builder's answers; a finding can be answered in every round of rework. */
export const findingAnswers = mysqlTable(
  "finding_answers",
  {
    id: id(),
    findingId: ref()
      .notNull()
      .references(() => findings.id),
    /** The revision being reworked when it was answered. */
    revisionId: ref()
      .notNull()
      .references(() => revisions.id),
    text: text().notNull(),
    answeredById: ref()
      .notNull()
      .references(() => people.id),
    answeredAt: moment().notNull(),
  },
  (table) => [unique("finding_answers_round").on(table.findingId, table.revisionId)],
);
