import { createHash, randomBytes } from "node:crypto";
import { and, desc, eq, gt, lt } from "drizzle-orm";
import { type Database, tables } from "~/db/client.server";

const { people, sessions } = tables;

/** A session lasts this long after it was last used… */
const IDLE_MS = 14 * 86_400_000;
/** …and its time of use is written at most this often. */
const SEEN_STEP_MS = 60_000;

export interface SessionOrigin {
  userAgent: string;
  ip: string;
}

export interface OpenSession {
  idHash: string;
  person: { id: number; name: string; email: string };
  /** Its end was just put off, so the cookie's must be too. */
  renewed: boolean;
}

/** Hex SHA-256 of a secret that only its holder knows. */
export function hashSecret(secret: string): string {
  return createHash("sha256").update(secret).digest("hex");
}

/** A new 256-bit secret for a cookie or a link. */
export function newSecret(): string {
  return randomBytes(32).toString("base64url");
}

/** Opens a session and returns its secret, which only the cookie will know. */
export async function openSession(
  db: Database,
  personId: number,
  origin: SessionOrigin,
  now: Date,
): Promise<string> {
  const secret = newSecret();
  await db.insert(sessions).values({
    idHash: hashSecret(secret),
    personId,
    userAgent: origin.userAgent.slice(0, 255),
    ip: origin.ip.slice(0, 45),
    createdAt: now,
    lastSeenAt: now,
    expiresAt: new Date(now.getTime() + IDLE_MS),
  });
  return secret;
}

/** The session and person behind a cookie's secret; null when it is unknown, revoked or expired. */
export async function findSession(db: Database, secret: string, now: Date): Promise<OpenSession | null> {
  const idHash = hashSecret(secret);
  const [row] = await db
    .select({ id: people.id, name: people.name, email: people.email, lastSeenAt: sessions.lastSeenAt })
    .from(sessions)
    .innerJoin(people, eq(people.id, sessions.personId))
    .where(and(eq(sessions.idHash, idHash), gt(sessions.expiresAt, now)));
  if (!row) return null;
  const renewed = now.getTime() - row.lastSeenAt.getTime() > SEEN_STEP_MS;
  if (renewed) {
    await db
      .update(sessions)
      .set({ lastSeenAt: now, expiresAt: new Date(now.getTime() + IDLE_MS) })
      .where(eq(sessions.idHash, idHash));
  }
  return { idHash, person: { id: row.id, name: row.name, email: row.email }, renewed };
}

/** A person's open sessions, the one used last first. */
export function listSessions(db: Database, personId: number, now: Date) {
  return db
    .select()
    .from(sessions)
    .where(and(eq(sessions.personId, personId), gt(sessions.expiresAt, now)))
    .orderBy(desc(sessions.lastSeenAt));
}

/** Ends one of the person's own sessions; somebody else's stays untouched. */
export async function revokeSession(db: Database, personId: number, idHash: string): Promise<void> {
  await db.delete(sessions).where(and(eq(sessions.personId, personId), eq(sessions.idHash, idHash)));
}

/** Ends all sessions of a person, as after a change of password. */
export async function revokeAllSessions(db: Pick<Database, "delete">, personId: number): Promise<void> {
  await db.delete(sessions).where(eq(sessions.personId, personId));
}

/** Deletes what has expired; called at sign-in, where a delete more costs little. */
export async function sweepSessions(db: Database, now: Date): Promise<void> {
  await db.delete(sessions).where(lt(sessions.expiresAt, now));
}
