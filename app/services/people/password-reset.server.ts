import { and, eq, gt, isNull, ne } from "drizzle-orm";
import type { SignedInPerson } from "~/context";
import { type Database, inTransaction, tables } from "~/db/client.server";
import { AuthenticationError, ThrottledError } from "~/services/errors";
import { enqueueMails } from "~/services/mail/enqueue-mail.server";
import { confirmPassword } from "./authenticate.server";
import { hashPassword } from "./passwords.server";
import { hashSecret, newSecret, revokeAllSessions } from "./sessions.server";
import { addressKey, mailKey, noteTry } from "./throttle.server";

const { people, sessions, tokens } = tables;

const RESET_HOURS = 1;
const RESET_MS = RESET_HOURS * 3_600_000;

/**
 * Mails a link with which the person can set a new password. Nothing tells the asker whether anybody has that mail:
 * for an unknown one, and for one that has been asked for too often, simply no mail goes out.
 *
 * @throws ThrottledError when this address has asked too often, for whomever
 */
export async function requestReset(
  db: Database,
  { email, address, appUrl }: { email: string; address: string; appUrl: string },
  now: Date,
): Promise<void> {
  await noteTry(db, [addressKey("reset", address)], now);
  try {
    await noteTry(db, [mailKey("reset", email)], now);
  } catch (error) {
    if (error instanceof ThrottledError) return;
    throw error;
  }
  const secret = newSecret();
  await inTransaction(db, async (tx) => {
    const [person] = await tx.select().from(people).where(eq(people.email, email.toLowerCase()));
    // Somebody who never accepted an invitation has no password to forget.
    if (!person?.passwordHash) return;
    await tx.insert(tokens).values({
      hash: hashSecret(secret),
      purpose: "reset",
      personId: person.id,
      createdAt: now,
      expiresAt: new Date(now.getTime() + RESET_MS),
    });
    await enqueueMails(tx, [
      {
        workshopId: null,
        recipient: person.email,
        toName: person.name,
        at: now,
        subject: "Set a new password for Mainsgate",
        paragraphs: [
          "Somebody, most likely you, asked to set a new password for this mail address.",
          "The link works once, within one hour. If it wasn’t you, do nothing: your password stays as it is.",
        ],
        link: { label: "Set a new password", href: `${appUrl}/reset/${secret}` },
        from: "Mainsgate",
      },
    ]);
  });
}

/** The person whom a reset link belongs to; null when it is unknown, used or expired. */
export async function findReset(db: Database, secret: string, now: Date): Promise<{ email: string } | null> {
  const [row] = await db
    .select({ email: people.email })
    .from(tokens)
    .innerJoin(people, eq(people.id, tokens.personId))
    .where(stillCounts(secret, now));
  return row ?? null;
}

/**
 * Uses a reset link: sets the password, spends every other reset link of the person and ends all sessions.
 * @throws AuthenticationError when the link is unknown, used or expired
 */
export async function resetPassword(
  db: Database,
  secret: string,
  password: string,
  now: Date,
): Promise<void> {
  // Looked up before the costly hash; decided under the lock below.
  if (!(await findReset(db, secret, now))) throw new AuthenticationError(SPENT);
  const passwordHash = await hashPassword(password);
  await inTransaction(db, async (tx) => {
    const [token] = await tx.select().from(tokens).where(stillCounts(secret, now)).for("update");
    if (!token) throw new AuthenticationError(SPENT);
    await tx
      .update(tokens)
      .set({ usedAt: now })
      .where(and(eq(tokens.personId, token.personId), eq(tokens.purpose, "reset"), isNull(tokens.usedAt)));
    await tx.update(people).set({ passwordHash }).where(eq(people.id, token.personId));
    await revokeAllSessions(tx, token.personId);
  });
}

/**
 * Changes the password of a signed-in person and ends all sessions but the one it was done in.
 * @throws AuthenticationError when the current password is wrong, ThrottledError
 */
export async function changePassword(
  db: Database,
  person: SignedInPerson,
  input: { current: string; password: string; address: string; keepSession: string },
  now: Date,
): Promise<void> {
  await confirmPassword(db, person, { password: input.current, address: input.address }, now);
  const passwordHash = await hashPassword(input.password);
  await inTransaction(db, async (tx) => {
    await tx.update(people).set({ passwordHash }).where(eq(people.id, person.id));
    await tx
      .update(tokens)
      .set({ usedAt: now })
      .where(and(eq(tokens.personId, person.id), eq(tokens.purpose, "reset"), isNull(tokens.usedAt)));
    await tx
      .delete(sessions)
      .where(and(eq(sessions.personId, person.id), ne(sessions.idHash, input.keepSession)));
  });
}

const SPENT = "This link was used already or is older than one hour. Ask for a new one.";

function stillCounts(secret: string, now: Date) {
  return and(
    eq(tokens.hash, hashSecret(secret)),
    eq(tokens.purpose, "reset"),
    isNull(tokens.usedAt),
    gt(tokens.expiresAt, now),
  );
}
