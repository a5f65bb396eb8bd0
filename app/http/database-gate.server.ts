import { sql } from "drizzle-orm";
import { database } from "~/services/database.server";

const FRESH_MS = 1_000;
const PING_PATIENCE_MS = 2_000;
const PAUSE_MS = 250;

let answeredAt = 0;

/** Whether MariaDB answers a trivial query now. */
export async function databaseAnswers(): Promise<boolean> {
  let timer: NodeJS.Timeout | undefined;
  const tooLate = new Promise<false>((resolve) => {
    timer = setTimeout(() => resolve(false), PING_PATIENCE_MS);
  });
  const ping = database()
    .execute(sql`SELECT 1`)
    .then(
      () => true,
      () => false,
    );
  const answered = await Promise.race([ping, tooLate]);
  clearTimeout(timer);
  answeredAt = answered ? Date.now() : 0;
  return answered;
}

/** Forgets that the database answered a moment ago, after a query failed. */
export function doubtDatabase(): void {
  answeredAt = 0;
}

/**
 * Waits until the database answers: at once when it did within the last second, and through a restart of MariaDB
 * otherwise, so that a form sent during it is not lost. False when `patienceMs` is over.
 */
export async function waitForDatabase(patienceMs: number): Promise<boolean> {
  const deadline = Date.now() + patienceMs;
  while (Date.now() - answeredAt > FRESH_MS) {
    if (await databaseAnswers()) return true;
    if (Date.now() >= deadline) return false;
    await new Promise((resolve) => setTimeout(resolve, PAUSE_MS));
  }
  return true;
}

const CONNECTION_CODES = new Set([
  "ECONNREFUSED",
  "ECONNRESET",
  "EPIPE",
  "ETIMEDOUT",
  "PROTOCOL_CONNECTION_LOST",
  "ER_SERVER_SHUTDOWN",
]);

/** Whether an error means that MariaDB went away, as opposed to having refused a query. */
export function isDatabaseAway(error: unknown): boolean {
  const cause = error instanceof Error && error.cause instanceof Error ? error.cause : error;
  return (
    error instanceof Error &&
    error.name === "DrizzleQueryError" &&
    cause instanceof Error &&
    "code" in cause &&
    typeof cause.code === "string" &&
    CONNECTION_CODES.has(cause.code)
  );
}
