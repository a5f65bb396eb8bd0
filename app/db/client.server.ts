import { drizzle, type MySql2Database } from "drizzle-orm/mysql2";
import mysql from "mysql2/promise";
import * as bench from "./schema/bench";
import * as decisions from "./schema/decisions";
import * as delivery from "./schema/delivery";
import * as people from "./schema/people";
import * as trail from "./schema/trail";
import * as units from "./schema/units";

export const tables = { ...people, ...units, ...bench, ...decisions, ...trail, ...delivery };

export type Database = MySql2Database<Record<string, never>>;
export type Transaction = Parameters<Parameters<Database["transaction"]>[0]>[0];
/** What reads need: the pool or an open transaction. */
export type Reader = Pick<Transaction, "select" | "selectDistinct">;

/** Opens a pool. Times are UTC on the wire; a dead connection is replaced at the next query. */
export function openDatabase(
  url: string,
  options: { connections?: number } = {},
): Database & { close(): Promise<void> } {
  const pool = mysql.createPool({
    uri: url,
    connectionLimit: options.connections ?? 20,
    timezone: "Z",
    charset: "utf8mb4",
    enableKeepAlive: true,
    connectTimeout: 5_000,
  });
  const database = drizzle({ client: pool, casing: "snake_case" });
  return Object.assign(database, { close: () => pool.end() });
}

/**
 * How often a transaction is tried, as a whole, after a race lost under snapshot isolation (1020), a lock wait timeout
 * (1205) and a deadlock (1213).
 */
const TRIES = new Map([
  [1020, 15],
  // MariaDB has waited for most of a minute by then.
  [1205, 2],
  [1213, 15],
]);

/** The MariaDB error number behind an error, or null. */
export function databaseErrorNumber(error: unknown): number | null {
  const cause = error instanceof Error && error.cause instanceof Error ? error.cause : error;
  if (cause instanceof Error && "errno" in cause && typeof cause.errno === "number") return cause.errno;
  return null;
}

/** Whether a unique key refused a row. */
export function isDuplicate(error: unknown): boolean {
  return databaseErrorNumber(error) === 1062;
}

/**
 * Runs `work` in one transaction, again when MariaDB says that it lost a race (1020, 1205, 1213).
 * `work` must therefore do nothing outside the database.
 */
export async function inTransaction<T>(
  database: Database,
  work: (tx: Transaction) => Promise<T>,
): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await database.transaction(work);
    } catch (error) {
      const number = databaseErrorNumber(error);
      if (number === null || attempt >= (TRIES.get(number) ?? 1)) throw error;
      // Those who meet at the head of a trail would meet there again if all came back at once.
      await new Promise((resolve) => setTimeout(resolve, Math.random() * Math.min(1_000, 10 * 2 ** attempt)));
    }
  }
}
