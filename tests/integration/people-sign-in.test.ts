import { and, eq, like } from "drizzle-orm";
import { expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { database } from "~/services/database.server";
import { AuthenticationError, ThrottledError } from "~/services/errors";
import { revokeOtherSessions } from "~/services/people/account.server";
import { authenticate, confirmPassword } from "~/services/people/authenticate.server";
import {
  changePassword,
  findReset,
  requestReset,
  resetPassword,
} from "~/services/people/password-reset.server";
import { hashPassword } from "~/services/people/passwords.server";
import {
  findSession,
  hashSecret,
  listSessions,
  openSession,
  revokeSession,
} from "~/services/people/sessions.server";
import { makePerson, nextNumber, TEST_MOMENT } from "../fixtures/workshop";

const db = database();
const now = TEST_MOMENT;
const password = "four plain words here";
const passwordHash = await hashPassword(password);
const minutes = (count: number) => new Date(now.getTime() + count * 60_000);
/** A client address that no other test uses. */
const newAddress = () => `192.0.2.${nextNumber() % 250}`;
const newPerson = () => makePerson(db, { passwordHash });

test("hashes are argon2id with at least the minimum cost that OWASP names (from memory: 19 MiB, t=2, p=1)", () => {
  expect(passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
});

test("mail and password together let a person in, with the mail in any case", async () => {
  const person = await newPerson();
  const address = newAddress();
  await expect(authenticate(db, { email: person.email, password, address }, now)).resolves.toEqual(person);
  await expect(
    authenticate(db, { email: person.email.toUpperCase(), password, address }, now),
  ).resolves.toEqual(person);
});

test("a wrong password, an unknown mail and a person without a password get the same answer", async () => {
  const person = await newPerson();
  const invited = await makePerson(db);
  const tries = [
    { email: person.email, password: "five plain words are here" },
    { email: "nobody@test.example", password },
    { email: invited.email, password: "" },
  ];
  const messages = await Promise.all(
    tries.map((credentials) =>
      authenticate(db, { ...credentials, address: newAddress() }, now).then(
        () => "let in",
        (error: unknown) => (error instanceof AuthenticationError ? error.message : String(error)),
      ),
    ),
  );
  expect(new Set(messages)).toEqual(new Set(["Mail and password don’t belong together."]));
});

test("after five wrong passwords even the right one is refused for a quarter of an hour, from anywhere", async () => {
  const person = await newPerson();
  const wrong = { email: person.email, password: "not this one at all" };
  for (let i = 0; i < 5; i++) {
    await expect(authenticate(db, { ...wrong, address: newAddress() }, now)).rejects.toThrow(
      AuthenticationError,
    );
  }
  const right = { email: person.email, password, address: newAddress() };
  await expect(authenticate(db, right, minutes(1))).rejects.toMatchObject({
    status: 429,
    retryAfterSeconds: 840,
  });
  // Knocking on while it is closed doesn't keep it closed longer.
  for (let i = 0; i < 6; i++) {
    await expect(authenticate(db, right, minutes(14))).rejects.toThrow(ThrottledError);
  }
  await expect(authenticate(db, right, minutes(16))).resolves.toEqual(person);
});

test("many tries at the same moment don't slip through between counting and noting", async () => {
  const person = await newPerson();
  const results = await Promise.allSettled(
    Array.from({ length: 20 }, () =>
      authenticate(db, { email: person.email, password: "not this one at all", address: newAddress() }, now),
    ),
  );
  const wrong = results.filter(
    (one) => one.status === "rejected" && one.reason instanceof AuthenticationError,
  );
  const throttled = results.filter(
    (one) => one.status === "rejected" && one.reason instanceof ThrottledError,
  );
  expect(wrong.length).toBeLessThanOrEqual(5);
  expect(wrong.length + throttled.length).toBe(20);
});

test("success forgets the person's failed tries", async () => {
  const person = await newPerson();
  const address = newAddress();
  for (let round = 0; round < 3; round++) {
    for (let i = 0; i < 4; i++) {
      await expect(
        authenticate(
          db,
          { email: person.email, password: "not this one at all", address: newAddress() },
          now,
        ),
      ).rejects.toThrow(AuthenticationError);
    }
    await authenticate(db, { email: person.email, password, address }, now);
  }
});

test("one address gets thirty wrong tries whoever they aim at, and no success clears them", async () => {
  const address = "2001:db8:1:2:3:4:5:6";
  const neighbour = "2001:db8:1:2:ffff::1";
  const person = await newPerson();
  for (let i = 0; i < 30; i++) {
    await expect(
      authenticate(db, { email: `nobody-${i}@test.example`, password: "x", address }, now),
    ).rejects.toThrow(AuthenticationError);
  }
  await expect(authenticate(db, { email: person.email, password, address: neighbour }, now)).rejects.toThrow(
    ThrottledError,
  );
  await expect(
    authenticate(db, { email: person.email, password, address: "2001:db8:1:3::1" }, now),
  ).resolves.toEqual(person);
});

test("wrong passwords at confirming count apart from those at signing in, so that no stranger keeps anybody from withdrawing", async () => {
  const person = await newPerson();
  const address = newAddress();
  await confirmPassword(db, person, { password, address }, now);
  for (let i = 0; i < 5; i++) {
    await expect(confirmPassword(db, person, { password: "wrong", address }, now)).rejects.toThrow(
      "That is not your password.",
    );
  }
  await expect(confirmPassword(db, person, { password, address }, now)).rejects.toThrow(ThrottledError);
  // Their own tries to confirm don't lock them out of signing in either.
  await authenticate(db, { email: person.email, password, address }, now);

  const besieged = await newPerson();
  for (let i = 0; i < 5; i++) {
    const stranger = { email: besieged.email, password: "wrong", address: newAddress() };
    await expect(authenticate(db, stranger, now)).rejects.toThrow(AuthenticationError);
  }
  await expect(
    authenticate(db, { email: besieged.email, password, address: newAddress() }, now),
  ).rejects.toThrow(ThrottledError);
  await confirmPassword(db, besieged, { password, address }, now);
});

test("a session is found by its secret until it is revoked or unused for two weeks", async () => {
  const person = await newPerson();
  const origin = { userAgent: "Test", ip: "192.0.2.1" };
  const secret = await openSession(db, person.id, origin, now);
  const day = 24 * 60;
  expect(await findSession(db, secret, now)).toMatchObject({ person, renewed: false });
  expect(await findSession(db, secret, minutes(13 * day))).toMatchObject({ renewed: true });
  expect(await findSession(db, secret, minutes(26 * day))).toMatchObject({ renewed: true });
  expect(await findSession(db, secret, minutes(41 * day))).toBeNull();

  const other = await openSession(db, person.id, origin, now);
  await revokeSession(db, person.id, hashSecret(other));
  expect(await findSession(db, other, now)).toBeNull();
});

test("the table holds no secret that would open a session", async () => {
  const person = await newPerson();
  const secret = await openSession(db, person.id, { userAgent: "Test", ip: "192.0.2.1" }, now);
  const rows = await db.select().from(tables.sessions).where(eq(tables.sessions.personId, person.id));
  expect(rows).toHaveLength(1);
  expect(JSON.stringify(rows)).not.toContain(secret);
  expect(await findSession(db, rows[0]?.idHash ?? "", now)).toBeNull();
});

test("a person ends their own sessions only, and all but this one at once", async () => {
  const [ada, bob] = [await newPerson(), await newPerson()];
  const origin = { userAgent: "Test", ip: "192.0.2.1" };
  const own = await openSession(db, ada.id, origin, now);
  await openSession(db, ada.id, origin, now);
  const foreign = await openSession(db, bob.id, origin, now);
  await revokeSession(db, ada.id, hashSecret(foreign));
  expect(await findSession(db, foreign, now)).not.toBeNull();
  expect(await revokeOtherSessions(db, ada.id, hashSecret(own))).toBe(1);
  expect((await listSessions(db, ada.id, now)).map((session) => session.idHash)).toEqual([hashSecret(own)]);
  expect(await findSession(db, foreign, now)).not.toBeNull();
});

test("changing the password needs the current one and ends the other sessions", async () => {
  const person = await newPerson();
  const origin = { userAgent: "Test", ip: "192.0.2.1" };
  const [kept, ended] = [
    await openSession(db, person.id, origin, now),
    await openSession(db, person.id, origin, now),
  ];
  const address = newAddress();
  const input = { password: "quite another one now", address, keepSession: hashSecret(kept) };
  await expect(changePassword(db, person, { ...input, current: "wrong" }, now)).rejects.toThrow(
    AuthenticationError,
  );
  expect(await findSession(db, ended, now)).not.toBeNull();
  await changePassword(db, person, { ...input, current: password }, now);
  expect(await findSession(db, kept, now)).not.toBeNull();
  expect(await findSession(db, ended, now)).toBeNull();
  await expect(authenticate(db, { email: person.email, password, address }, now)).rejects.toThrow(
    AuthenticationError,
  );
  await authenticate(db, { email: person.email, password: "quite another one now", address }, now);
});

/** Asks for a reset and reads the secret out of the mail in the outbox; null when none was written. */
async function askForReset(email: string, at = now): Promise<string | null> {
  const before = await mailsTo(email);
  await requestReset(db, { email, address: newAddress(), appUrl: "https://mainsgate.test" }, at);
  const mails = await mailsTo(email);
  if (mails.length === before.length) return null;
  return /https:\/\/mainsgate\.test\/reset\/([\w-]{43})\b/.exec(mails.at(-1)?.text ?? "")?.[1] ?? null;
}

function mailsTo(email: string) {
  const { outbox } = tables;
  return db
    .select()
    .from(outbox)
    .where(and(eq(outbox.recipient, email), like(outbox.subject, "%password%")))
    .orderBy(outbox.id);
}

test("a forgotten password is set anew by a mailed link, which works once and ends every session", async () => {
  const person = await newPerson();
  const session = await openSession(db, person.id, { userAgent: "Test", ip: "192.0.2.1" }, now);
  const secret = (await askForReset(person.email)) ?? "";
  expect(await findReset(db, secret, now)).toEqual({ email: person.email });
  await resetPassword(db, secret, "a new one, chosen well", now);
  expect(await findSession(db, session, now)).toBeNull();
  await authenticate(
    db,
    { email: person.email, password: "a new one, chosen well", address: newAddress() },
    now,
  );
  expect(await findReset(db, secret, now)).toBeNull();
  await expect(resetPassword(db, secret, "and once more with this", now)).rejects.toThrow(
    AuthenticationError,
  );
});

test("of two uses of one link at the same moment only one counts", async () => {
  const person = await newPerson();
  const secret = (await askForReset(person.email)) ?? "";
  const results = await Promise.allSettled(
    ["first new password", "second new password"].map((chosen) => resetPassword(db, secret, chosen, now)),
  );
  expect(results.map((result) => result.status).sort()).toEqual(["fulfilled", "rejected"]);
});

test("a reset link expires after an hour, and using one spends the others", async () => {
  const person = await newPerson();
  const first = (await askForReset(person.email)) ?? "";
  const second = (await askForReset(person.email)) ?? "";
  expect(await findReset(db, first, minutes(59))).not.toBeNull();
  expect(await findReset(db, first, minutes(60))).toBeNull();
  await expect(resetPassword(db, first, "a new one, chosen well", minutes(60))).rejects.toThrow(
    AuthenticationError,
  );
  await resetPassword(db, second, "a new one, chosen well", minutes(5));
  expect(await findReset(db, first, minutes(6))).toBeNull();
});

test("the table holds no secret that would reset a password", async () => {
  const person = await newPerson();
  const secret = await askForReset(person.email);
  expect(secret).not.toBeNull();
  const rows = await db.select().from(tables.tokens).where(eq(tables.tokens.personId, person.id));
  expect(rows).toHaveLength(1);
  expect(JSON.stringify(rows)).not.toContain(secret);
});

test("asking for an unknown mail, or for somebody who never joined, ends the same and sends nothing", async () => {
  const invited = await makePerson(db);
  expect(await askForReset("nobody-at-all@test.example")).toBeNull();
  expect(await askForReset(invited.email)).toBeNull();
});

test("asking again and again sends five mails at most, and still tells nothing", async () => {
  const person = await newPerson();
  const secrets = [];
  for (let i = 0; i < 8; i++) secrets.push(await askForReset(person.email));
  expect(secrets.filter((secret) => secret !== null)).toHaveLength(5);
});
