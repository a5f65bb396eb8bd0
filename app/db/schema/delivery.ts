import { index, int, mysqlEnum, mysqlTable, text, unique, varchar } from "drizzle-orm/mysql-core";
import { id, moment, ref } from "./columns";
import { workshops } from "./people";

/** Mail to be sent, written in the transaction of the act that it tells of. Text and HTML are emptied once it is sent. */
export const outbox = mysqlTable(
  "outbox",
  {
    id: id(),
    workshopId: ref().references(() => workshops.id),
    recipient: varchar({ length: 254 }).notNull(),
    subject: varchar({ length: 200 }).notNull(),
    text: text().notNull(),
    html: text().notNull(),
    /** Sent once although tried again: also the Message-ID's left part. */
    messageKey: varchar({ length: 60 }).notNull().unique(),
    createdAt: moment().notNull(),
    dueAt: moment().notNull(),
    attempts: int({ unsigned: true }).notNull().default(0),
    lockedUntil: moment(),
    sentAt: moment(),
    lastError: varchar({ length: 500 }),
  },
  (table) => [index("outbox_due").on(table.sentAt, table.dueAt)],
);

export const jobKinds = ["make-record-pdf"] as const;

/** Work to be done in the wake of a transaction; taken with a lease, so that a crash only delays it. */
export const jobs = mysqlTable(
  "jobs",
  {
    id: id(),
    kind: mysqlEnum(jobKinds).notNull(),
    /** The id of the row that the job is about. */
    subjectId: ref().notNull(),
    createdAt: moment().notNull(),
    dueAt: moment().notNull(),
    attempts: int({ unsigned: true }).notNull().default(0),
    lockedUntil: moment(),
    doneAt: moment(),
    lastError: varchar({ length: 500 }),
  },
  (table) => [
    unique("jobs_once").on(table.kind, table.subjectId),
    index("jobs_due").on(table.doneAt, table.dueAt),
  ],
);
