import { eq } from "drizzle-orm";
import type { SignedInPerson } from "~/context";
import { type Database, tables } from "~/db/client.server";
import { AuthenticationError } from "~/services/errors";
import { passwordMatches } from "./passwords.server";
import { addressKey, confirmKey, mailKey, noteTry } from "./throttle.server";

const { people } = tables;

export interface Credentials {
  email: string;
  password: string;
  /** Where the request came from, for throttling. */
  address: string;
}

/**
 * Finds the person by mail and password. An unknown mail and a wrong password look and take the same.
 *
 * @throws AuthenticationError, or ThrottledError before any password is hashed
 */
export async function authenticate(
  db: Database,
  { email, password, address }: Credentials,
  now: Date,
): Promise<SignedInPerson> {
  const ofMail = mailKey("sign-in", email);
  const attempt = await noteTry(db, [ofMail, addressKey("sign-in", address)], now);
  const [person] = await db.select().from(people).where(eq(people.email, email.toLowerCase()));
  if (!(await passwordMatches(person?.passwordHash ?? null, password)) || !person) {
    throw new AuthenticationError("Mail and password don’t belong together.");
  }
  await attempt.forgive([ofMail]);
  return { id: person.id, name: person.name, email: person.email };
}

/**
 * Asks a signed-in person for their password again, as before a signature or a change of password. Wrong ones count per
 * person and address, and apart from the tries to sign in.
 *
 * @throws AuthenticationError when it is wrong, ThrottledError
 */
export async function confirmPassword(
  db: Database,
  { id }: SignedInPerson,
  { password, address }: { password: string; address: string },
  now: Date,
): Promise<void> {
  const key = confirmKey(id);
  const attempt = await noteTry(db, [key, addressKey("confirm", address)], now);
  const [person] = await db
    .select({ passwordHash: people.passwordHash })
    .from(people)
    .where(eq(people.id, id));
  if (!(await passwordMatches(person?.passwordHash ?? null, password))) {
    throw new AuthenticationError("That is not your password.");
  }
  await attempt.forgive([key]);
}
