import { sql } from "drizzle-orm";
import {
  char,
  check,
  customType,
  date,
  index,
  int,
  json,
  mediumtext,
  mysqlEnum,
  mysqlTable,
  text,
  unique,
  varchar,
} from "drizzle-orm/mysql-core";
import { id, moment, ref } from "./columns";
import { licences, people, workshops } from "./people";
import { revisions, units } from "./units";

const mediumblob = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => "mediumblob" });

/** Conditions under which a signed unit may be used. */
export interface SigningConditions {
  place: string;
  supply: string;
  load: string;
  supervision: string;
  other: string;
}

/** A signature or a refusal: one per revision, so that a double click can't make two. */
export const decisions = mysqlTable(
  "decisions",
  {
    id: id(),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    revisionId: ref()
      .notNull()
      .references(() => revisions.id),
    kind: mysqlEnum(["signed", "refused"]).notNull(),
    signerId: ref()
      .notNull()
      .references(() => people.id),
    licenceId: ref()
      .notNull()
      .references(() => licences.id),
    /** What the signer states by signing, or why they refuse. */
    statement: text().notNull(),
    /** Why it may be used although checks fail; null where none fails. */
    departures: text(),
    conditions: json().$type<SigningConditions>(),
    recheckOn: date({ mode: "string" }),
    signatureMethod: mysqlEnum(["drawn", "typed"]).notNull(),
    /** PNG of a drawn signature. */
    signatureImage: mediumblob(),
    typedName: varchar({ length: 120 }),
    decidedAt: moment().notNull(),
  },
  (table) => [
    unique("decisions_revision").on(table.revisionId),
    index("decisions_by_unit").on(table.unitId),
    check(
      "decisions_shape",
      sql`(kind <> 'signed' or (conditions is not null and recheck_on is not null))
        and ((signature_method = 'drawn') = (signature_image is not null))
        and ((signature_method = 'typed') = (typed_name is not null))`,
    ),
  ],
);

/** The record of a decision: canonical JSON written in the signing transaction, PDF made once by a job. */
export const records = mysqlTable(
  "records",
  {
    id: id(),
    workshopId: ref()
      .notNull()
      .references(() => workshops.id),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    decisionId: ref()
      .notNull()
      .references(() => decisions.id)
      .unique("records_decision"),
    /** Random, unguessable; the address of the public page behind the QR code. */
    publicCode: varchar({ length: 32 }).notNull().unique(),
    /** RFC 8785 canonical JSON, byte for byte what `sha256` was computed over. */
    canonicalJson: mediumtext().notNull(),
    sha256: char({ length: 64 }).notNull(),
    madeAt: moment().notNull(),
    pdfKey: varchar({ length: 190 }),
    pdfSha256: char({ length: 64 }),
    pdfBytes: int({ unsigned: true }),
    pdfMadeAt: moment(),
  },
  (table) => [
    index("records_by_workshop").on(table.workshopId, table.madeAt),
    index("records_by_unit").on(table.unitId),
  ],
);

export const withdrawals = mysqlTable("withdrawals", {
  id: id(),
  recordId: ref()
    .notNull()
    .references(() => records.id)
    .unique("withdrawals_record"),
  byId: ref()
    .notNull()
    .references(() => people.id),
  reason: text().notNull(),
  at: moment().notNull(),
});
