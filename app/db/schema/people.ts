import {
  boolean,
  char,
  date,
  index,
  int,
  json,
  mysqlEnum,
  mysqlTable,
  primaryKey,
  unique,
  varchar,
} from "drizzle-orm/mysql-core";
import { roles, type Role } from "~/workflow/roles";
import { id, moment, ref } from "./columns";

/** The policies of engine/verdict.ts by which a stated accuracy becomes an uncertainty. */
export const accuracyPolicies = ["rect", "maker-k2"] as const;

export const people = mysqlTable("people", {
  id: id(),
  email: varchar({ length: 254 }).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  /** argon2id, in PHC string format. Null until an invitation has been accepted. */
  passwordHash: varchar({ length: 255 }),
  createdAt: moment().notNull(),
});

export const workshops = mysqlTable("workshops", {
  id: id(),
  slug: varchar({ length: 60 }).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  timeZone: varchar({ length: 60 }).notNull(),
  isDemo: boolean().notNull(),
  ruleSetKey: varchar({ length: 60 }).notNull(),
  ruleSetVersion: varchar({ length: 20 }).notNull(),
  /** How an instrument's accuracy becomes an uncertainty: see engine/verdict.ts. */
  accuracyPolicy: mysqlEnum(accuracyPolicies).notNull(),
  /** Months until the recheck date that the signing page proposes. */
  recheckMonths: int({ unsigned: true }).notNull(),
  /** The number that the next unit gets; incremented under this row's lock. */
  nextUnitNumber: int({ unsigned: true }).notNull().default(1),
  createdAt: moment().notNull(),
});

export const memberships = mysqlTable(
  "memberships",
  {
    workshopId: ref()
      .notNull()
      .references(() => workshops.id),
    personId: ref()
      .notNull()
      .references(() => people.id),
    role: mysqlEnum(roles).notNull(),
    grantedAt: moment().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.workshopId, table.personId, table.role] }),
    index("memberships_by_person").on(table.personId),
  ],
);

export const licences = mysqlTable(
  "licences",
  {
    id: id(),
    workshopId: ref()
      .notNull()
      .references(() => workshops.id),
    personId: ref()
      .notNull()
      .references(() => people.id),
    /** As the licence itself says it: signatures and records carry this name, whatever the account is called. */
    holderName: varchar({ length: 120 }).notNull(),
    number: varchar({ length: 60 }).notNull(),
    authority: varchar({ length: 120 }).notNull(),
    validFrom: date({ mode: "string" }).notNull(),
    validTo: date({ mode: "string" }).notNull(),
    /** Scope: the highest supply voltage, and whether battery equipment is covered. */
    maxSupplyVolts: int({ unsigned: true }).notNull(),
    coversBatteries: boolean().notNull(),
    revokedAt: moment(),
  },
  (table) => [
    unique("licences_number").on(table.workshopId, table.authority, table.number),
    index("licences_by_person").on(table.workshopId, table.personId),
  ],
);

export const sessions = mysqlTable(
  "sessions",
  {
    /** SHA-256 of the secret in the cookie, in hex: a leaked table opens no session. */
    idHash: char({ length: 64 }).primaryKey(),
    personId: ref()
      .notNull()
      .references(() => people.id),
    userAgent: varchar({ length: 255 }).notNull(),
    ip: varchar({ length: 45 }).notNull(),
    createdAt: moment().notNull(),
    lastSeenAt: moment().notNull(),
    expiresAt: moment().notNull(),
  },
  (table) => [
    index("sessions_by_person").on(table.personId),
    index("sessions_by_expiry").on(table.expiresAt),
  ],
);

export const tokens = mysqlTable(
  "tokens",
  {
    id: id(),
    /** SHA-256 of the token in the link, in hex. */
    hash: char({ length: 64 }).notNull().unique(),
    purpose: mysqlEnum(["reset", "invitation"]).notNull(),
    personId: ref()
      .notNull()
      .references(() => people.id),
    workshopId: ref().references(() => workshops.id),
    roles: json().$type<Role[]>(),
    createdById: ref().references(() => people.id),
    createdAt: moment().notNull(),
    expiresAt: moment().notNull(),
    usedAt: moment(),
  },
  (table) => [index("tokens_by_person").on(table.personId), index("tokens_by_workshop").on(table.workshopId)],
);

/** Failed tries per key (an address or a person's mail), for throttling before any hashing. */
export const failedTries = mysqlTable(
  "failed_tries",
  {
    id: id(),
    key: varchar({ length: 320 }).notNull(),
    at: moment().notNull(),
  },
  (table) => [
    index("failed_tries_by_key").on(table.key, table.at),
    index("failed_tries_by_moment").on(table.at),
  ],
);
