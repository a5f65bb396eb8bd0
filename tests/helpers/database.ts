import { randomBytes } from "node:crypto";
import mysql from "mysql2/promise";
import { inject } from "vitest";
import { applyMigrations } from "../../local/migrations";
import { DATABASE_NAME } from "../../local/mariadb";

export interface FreshDatabase {
  /** The application's connection: append-only tables can't be changed with it. */
  url: string;
  /** The owner's connection, for what a test must do behind the application's back. */
  ownerUrl: string;
  drop(): Promise<void>;
}

/** Makes an empty database with all migrations applied and the application's rights granted. */
export async function freshDatabase(): Promise<FreshDatabase> {
  const { ownerUrl, variables } = inject("services");
  const name = `${DATABASE_NAME}_${randomBytes(6).toString("hex")}`;
  await ownerQuery(ownerUrl, `CREATE DATABASE ${name}`);
  const own = withDatabase(ownerUrl, name);
  await applyMigrations(process.cwd(), own);
  return {
    url: withDatabase(variables.DATABASE_URL ?? "", name),
    ownerUrl: own,
    async drop() {
      await ownerQuery(ownerUrl, `DROP DATABASE IF EXISTS ${name}`);
    },
  };
}

/** Runs one statement as the owner and gives its rows. */
export async function ownerQuery(
  ownerUrl: string,
  sql: string,
  values: unknown[] = [],
): Promise<mysql.RowDataPacket[]> {
  const connection = await mysql.createConnection({ uri: ownerUrl, timezone: "Z" });
  try {
    const [rows] = await connection.query<mysql.RowDataPacket[]>(sql, values);
    return Array.isArray(rows) ? rows : [];
  } finally {
    await connection.end();
  }
}

/** The owner's connection to this test file's own database. */
export function ownerUrlOfThisFile(): string {
  const name = new URL(process.env.DATABASE_URL ?? "").pathname.slice(1);
  return withDatabase(inject("services").ownerUrl, name);
}

function withDatabase(url: string, name: string): string {
  const changed = new URL(url);
  changed.pathname = `/${name}`;
  return changed.href;
}
