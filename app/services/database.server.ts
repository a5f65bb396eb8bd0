import { type Database, openDatabase } from "~/db/client.server";
import { environment } from "~/environment.server";

let opened: Database | undefined;

/** The process's one pool, opened at its first use. */
export function database(): Database {
  opened ??= openDatabase(environment().DATABASE_URL);
  return opened;
}
