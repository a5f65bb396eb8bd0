import { eq } from "drizzle-orm";
import type { SignedInPerson } from "~/context";
import { type Database, tables } from "~/db/client.server";
import { AuthenticationError } from "~/services/errors";
import { passwordMatches } from "./passwords.server";
import { addressKey, mailKey, noteTry } from "./throttle.server";

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
 * Asks a signed-in person for their password again, as before a signature or a change of password. Counts with the
 * tries to sign in.
 *
 * @throws AuthenticationError when it is wrong, ThrottledError
 */
export async function confirmPassword(
  db: Database,
  person: SignedInPerson,
  { password, address }: { password: string; address: string },
  now: Date,
): Promise<void> {
  try {
    await authenticate(db, { email: person.email, password, address }, now);
  } catch (error) {
    if (error instanceof AuthenticationError) throw new AuthenticationError("That is not your password.");
    throw error;
  }
}
