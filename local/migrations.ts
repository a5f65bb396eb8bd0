import { existsSync } from "node:fs";
import { join } from "node:path";
import { drizzle } from "drizzle-orm/mysql2";
import { migrate } from "drizzle-orm/mysql2/migrator";
import mysql from "mysql2/promise";
import { APP_USER } from "./mariadb";

/** Tables that the application may only read and add to: what they hold can't be rewritten by a bug or a break-in. */
export const appendOnlyTables: readonly string[] = [
  "audit_entries",
  "decisions",
  "observations",
  "withdrawals",
];

/** Tables that it may add to, and in whose rows it may change these columns only. */
export const changeableColumns: Readonly<Record<string, readonly string[]>> = {
  records: ["pdf_key", "pdf_sha256", "pdf_bytes", "pdf_made_at"],
};

/** MariaDB's answer to revoking what was never granted: 1141 for the user, 1147 for the table. */
const NOT_GRANTED = new Set([1141, 1147]);

/**
 * Applies the migrations in `root`/drizzle as the owner, then gives the application its rights, table by table.
 * @returns how many migrations were new
 */
export async function applyMigrations(root: string, ownerUrl: string): Promise<number> {
  const migrationsFolder = join(root, "drizzle");
  const connection = await mysql.createConnection({ uri: ownerUrl, timezone: "Z" });
  try {
    if (!existsSync(join(migrationsFolder, "meta/_journal.json"))) return 0;
    const before = await appliedMigrations(connection);
    await migrate(drizzle({ client: connection }), { migrationsFolder });
    await grantToApplication(connection);
    return (await appliedMigrations(connection)) - before;
  } finally {
    await connection.end();
  }
}

async function appliedMigrations(connection: mysql.Connection): Promise<number> {
  if (!(await tableNames(connection)).includes("__drizzle_migrations")) return 0;
  const [rows] = await connection.query<mysql.RowDataPacket[]>(
    "SELECT COUNT(*) AS n FROM `__drizzle_migrations`",
  );
  return Number(rows[0]?.n);
}

async function tableNames(connection: mysql.Connection): Promise<string[]> {
  const [rows] = await connection.query<mysql.RowDataPacket[]>(
    "SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE'",
  );
  return rows.map((row) => String(row.name));
}

async function grantToApplication(connection: mysql.Connection): Promise<void> {
  const account = `'${APP_USER}'@'127.0.0.1'`;
  for (const table of await tableNames(connection)) {
    if (table === "__drizzle_migrations") continue;
    const columns = changeableColumns[table] ?? [];
    const kept = appendOnlyTables.includes(table) || columns.length > 0;
    const rights = kept ? "SELECT, INSERT" : "SELECT, INSERT, UPDATE, DELETE";
    await connection.query(`GRANT ${rights} ON ${mysql.escapeId(table)} TO ${account}`);
    if (kept) await revoke(connection, table, account);
    if (columns.length > 0) {
      const names = columns.map((column) => mysql.escapeId(column)).join(", ");
      await connection.query(`GRANT UPDATE (${names}) ON ${mysql.escapeId(table)} TO ${account}`);
    }
  }
}

async function revoke(connection: mysql.Connection, table: string, account: string): Promise<void> {
  try {
    await connection.query(`REVOKE UPDATE, DELETE ON ${mysql.escapeId(table)} FROM ${account}`);
  } catch (error) {
    if (!(error instanceof Error && "errno" in error && NOT_GRANTED.has(Number(error.errno)))) throw error;
  }
}

/** Whether nobody has worked here yet: no workshop, so the demo may be put in. */
export async function isEmptyDatabase(ownerUrl: string): Promise<boolean> {
  const connection = await mysql.createConnection({ uri: ownerUrl });
  try {
    if (!(await tableNames(connection)).includes("workshops")) return false;
    const [rows] = await connection.query<mysql.RowDataPacket[]>("SELECT 1 FROM workshops LIMIT 1");
    return rows.length === 0;
  } finally {
    await connection.end();
  }
}

/** Throws all tables away. Only for a database that the start command made and nobody has worked in. */
export async function recreateDatabase(ownerUrl: string): Promise<void> {
  const name = mysql.escapeId(new URL(ownerUrl).pathname.slice(1));
  const connection = await mysql.createConnection({ uri: ownerUrl });
  try {
    await connection.query(`DROP DATABASE ${name}`);
    await connection.query(`CREATE DATABASE ${name}`);
  } finally {
    await connection.end();
  }
}
