import { createHash } from "node:crypto";
import { and, desc, eq } from "drizzle-orm";
import { expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { database } from "~/services/database.server";
import { AuthenticationError, ForbiddenError, InvalidInputError, NotFoundError } from "~/services/errors";
import {
  acceptInvitation,
  cancelInvitation,
  findInvitation,
  invite,
  listInvitations,
  resendInvitation,
} from "~/services/people/invitations.server";
import { addLicence, licencesOf, listLicences, revokeLicence } from "~/services/people/licences.server";
import { renamePerson } from "~/services/people/account.server";
import { changeRoles, getMember, listMembers, removeMember } from "~/services/people/members.server";
import { hashPassword } from "~/services/people/passwords.server";
import { findWorkshop, listWorkshops } from "~/services/people/workshops.server";
import { fitLicence } from "~/workflow/licence-fit";
import {
  everyRole,
  grantRoles,
  makeLicence,
  makeMember,
  makePerson,
  makeWorkshop,
  nextNumber,
  TEST_MOMENT,
} from "../fixtures/workshop";

const db = database();
const now = TEST_MOMENT;
const days = (count: number) => new Date(now.getTime() + count * 86_400_000);
const password = "four plain words here";
const newMail = () => `invited-${nextNumber()}@test.example`;

/** The secret in the newest invitation that was mailed to an address. */
async function mailedInvitation(email: string): Promise<string> {
  const [mail] = await db
    .select()
    .from(tables.outbox)
    .where(eq(tables.outbox.recipient, email))
    .orderBy(desc(tables.outbox.id))
    .limit(1);
  const secret = /\/invitation\/([\w-]{43})\b/.exec(mail?.text ?? "")?.[1];
  if (!secret) throw new Error(`No invitation was mailed to ${email}.`);
  return secret;
}

const sha256 = (text: string) => createHash("sha256").update(text).digest("hex");

async function trail(workshopId: number) {
  const rows = await db
    .select({
      act: tables.auditEntries.act,
      actor: tables.auditEntries.actorId,
      detail: tables.auditEntries.detail,
    })
    .from(tables.auditEntries)
    .where(eq(tables.auditEntries.workshopId, workshopId))
    .orderBy(tables.auditEntries.sequence);
  return rows;
}

test("somebody new accepts an invitation with a name and a password and holds its roles", async () => {
  const made = await makeWorkshop(db);
  const email = newMail();
  await invite(made.as("steward"), { email, name: "Ada", roles: ["builder", "inspector"] });
  const secret = await mailedInvitation(email);
  const open = await findInvitation(db, secret, now);
  expect(open).toMatchObject({ email, name: "Ada", isNew: true, roles: ["builder", "inspector"] });

  const joined = await acceptInvitation(db, secret, { kind: "new", name: "Ada Lund", password }, now);
  expect(joined.workshop.slug).toBe(made.workshop.slug);
  expect((await findWorkshop(db, made.workshop.slug, joined.personId))?.roles).toEqual([
    "builder",
    "inspector",
  ]);
  expect(await getMember(made.as("steward"), joined.personId)).toMatchObject({ name: "Ada Lund", email });
  expect((await trail(made.workshop.id)).map(({ act, actor }) => [act, actor])).toEqual([
    ["people.invite", made.people.steward.id],
    ["people.join", joined.personId],
  ]);
});

test("an invitation works once, for seven days, and not after it was cancelled", async () => {
  const { as } = await makeWorkshop(db);
  const [once, late, cancelled] = [newMail(), newMail(), newMail()];
  for (const email of [once, late, cancelled])
    await invite(as("steward"), { email, name: "New", roles: ["builder"] });

  const secret = await mailedInvitation(once);
  await acceptInvitation(db, secret, { kind: "new", name: "New", password }, now);
  await expect(acceptInvitation(db, secret, { kind: "new", name: "Again", password }, now)).rejects.toThrow(
    AuthenticationError,
  );

  expect(await findInvitation(db, await mailedInvitation(late), days(6.99))).not.toBeNull();
  expect(await findInvitation(db, await mailedInvitation(late), days(7))).toBeNull();
  await expect(
    acceptInvitation(db, await mailedInvitation(late), { kind: "new", name: "Late", password }, days(7)),
  ).rejects.toThrow(AuthenticationError);

  const open = (await listInvitations(as("steward"))).find(({ email }) => email === cancelled);
  await cancelInvitation(as("steward"), open?.id ?? 0);
  expect(await findInvitation(db, await mailedInvitation(cancelled), now)).toBeNull();
  await expect(cancelInvitation(as("steward"), open?.id ?? 0)).rejects.toThrow(NotFoundError);
});

test("an invitation accepted twice at the same moment makes one password and one membership", async () => {
  const { as, workshop } = await makeWorkshop(db);
  const email = newMail();
  await invite(as("steward"), { email, name: "New", roles: ["builder"] });
  const secret = await mailedInvitation(email);
  const results = await Promise.allSettled(
    ["One", "Two"].map((name) => acceptInvitation(db, secret, { kind: "new", name, password }, now)),
  );
  expect(results.map((result) => result.status).sort()).toEqual(["fulfilled", "rejected"]);
  expect((await trail(workshop.id)).filter(({ act }) => act === "people.join")).toHaveLength(1);
});

test("sending it again ends the old link, and inviting again replaces the roles", async () => {
  const { as } = await makeWorkshop(db);
  const email = newMail();
  await invite(as("steward"), { email, name: "New", roles: ["builder"] });
  const first = await mailedInvitation(email);
  await resendInvitation(as("steward"), (await listInvitations(as("steward")))[0]?.id ?? 0);
  const second = await mailedInvitation(email);
  expect(await findInvitation(db, first, now)).toBeNull();
  expect(await findInvitation(db, second, now)).toMatchObject({ roles: ["builder"] });
  await invite(as("steward"), { email, name: "New", roles: ["archivist"] });
  expect(await findInvitation(db, second, now)).toBeNull();
  expect(await listInvitations(as("steward"))).toMatchObject([
    { email, roles: ["archivist"], expired: false },
  ]);
});

test("a person of another workshop joins by password or signed in, and keeps name and password", async () => {
  const { as, workshop } = await makeWorkshop(db);
  const known = await makePerson(db, { name: "Known Elsewhere", passwordHash: await hashPassword(password) });
  await invite(as("steward"), { email: known.email, name: "Whoever", roles: ["builder"] });
  const secret = await mailedInvitation(known.email);
  const address = "192.0.2.77";

  await expect(
    acceptInvitation(db, secret, { kind: "new", name: "Taken Over", password: "another password" }, now),
  ).rejects.toThrow("Sign in with it to join.");
  await expect(
    acceptInvitation(db, secret, { kind: "password", password: "wrong", address }, now),
  ).rejects.toThrow(AuthenticationError);
  const stranger = await makePerson(db);
  await expect(acceptInvitation(db, secret, { kind: "signed-in", person: stranger }, now)).rejects.toThrow(
    "somebody else",
  );
  await acceptInvitation(db, secret, { kind: "password", password, address }, now);
  expect(await getMember(as("steward"), known.id)).toMatchObject({ name: "Known Elsewhere" });
  expect(await listWorkshops(db, known.id)).toEqual([{ slug: workshop.slug, name: workshop.name }]);
});

test("neither the list of invitations nor the mail gives away the name of a person of another workshop", async () => {
  const { as } = await makeWorkshop(db);
  const known = await makePerson(db, { name: "Secret Name", passwordHash: "set" });
  await invite(as("steward"), { email: known.email, name: "Whoever", roles: ["builder"] });
  const [invitation] = await listInvitations(as("steward"));
  expect(JSON.stringify(invitation)).not.toContain("Secret Name");
  await resendInvitation(as("steward"), invitation?.id ?? 0);
  const mails = await db.select().from(tables.outbox).where(eq(tables.outbox.recipient, known.email));
  expect(mails).toHaveLength(2);
  expect(JSON.stringify(mails)).not.toContain("Secret Name");
});

test("a member isn't invited again", async () => {
  const { as, people } = await makeWorkshop(db);
  await expect(
    invite(as("steward"), { email: people.builder.email.toUpperCase(), name: "X", roles: ["steward"] }),
  ).rejects.toThrow(InvalidInputError);
});

test("roles change as asked, with given and taken in the trail", async () => {
  const { as, workshop, people } = await makeWorkshop(db);
  const { id } = people.builder;
  await changeRoles(as("steward"), id, { expected: ["builder"], roles: ["inspector", "archivist"] });
  expect((await getMember(as("steward"), id)).roles).toEqual(["inspector", "archivist"]);
  expect(await trail(workshop.id)).toEqual([
    {
      act: "people.roles",
      actor: people.steward.id,
      detail: { person: id, given: ["inspector", "archivist"], taken: ["builder"] },
    },
  ]);
});

test("roles that somebody else changed meanwhile are not overwritten", async () => {
  const { as, people } = await makeWorkshop(db);
  const { id } = people.builder;
  await changeRoles(as("steward"), id, { expected: ["builder"], roles: ["builder", "inspector"] });
  await expect(
    changeRoles(as("steward"), id, { expected: ["builder"], roles: ["builder", "archivist"] }),
  ).rejects.toMatchObject({ status: 409 });
  expect((await getMember(as("steward"), id)).roles).toEqual(["builder", "inspector"]);
});

test("the last steward can neither step down nor be removed", async () => {
  const { as, people } = await makeWorkshop(db);
  const { id } = people.steward;
  await expect(
    changeRoles(as("steward"), id, { expected: ["steward"], roles: ["builder"] }),
  ).rejects.toMatchObject({ status: 422 });
  await expect(removeMember(as("steward"), id)).rejects.toMatchObject({ status: 422 });
  expect((await getMember(as("steward"), id)).roles).toEqual(["steward"]);
});

test("two stewards who remove each other at the same moment leave one behind", async () => {
  for (let round = 0; round < 5; round++) {
    const made = await makeWorkshop(db);
    const second = await makeMember(db, made, ["steward"]);
    const results = await Promise.allSettled([
      removeMember(made.as("steward"), second.id),
      removeMember(made.asPerson(second, ["steward"]), made.people.steward.id),
    ]);
    expect(results.filter(({ status }) => status === "fulfilled")).toHaveLength(1);
    const stewards = await db
      .select()
      .from(tables.memberships)
      .where(
        and(eq(tables.memberships.workshopId, made.workshop.id), eq(tables.memberships.role, "steward")),
      );
    expect(stewards).toHaveLength(1);
  }
});

test("two stewards who leave at the same moment: one must stay", async () => {
  for (let round = 0; round < 5; round++) {
    const made = await makeWorkshop(db);
    const second = await makeMember(db, made, ["steward"]);
    const results = await Promise.allSettled([
      removeMember(made.as("steward"), made.people.steward.id),
      removeMember(made.asPerson(second, ["steward"]), second.id),
    ]);
    expect(results.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
    expect(results.find((one) => one.status === "rejected")).toMatchObject({ reason: { status: 422 } });
  }
});

test("a removed member sees the workshop no more; what they were stays in the trail", async () => {
  const { as, workshop, people } = await makeWorkshop(db);
  await removeMember(as("steward"), people.builder.id);
  expect(await findWorkshop(db, workshop.slug, people.builder.id)).toBeNull();
  expect(await listWorkshops(db, people.builder.id)).toEqual([]);
  expect((await trail(workshop.id)).map(({ act }) => act)).toEqual(["people.remove"]);
});

test("a steward who lost the role a moment ago can't act on it any more", async () => {
  const made = await makeWorkshop(db);
  const second = await makeMember(db, made, ["steward"]);
  const stale = made.asPerson(second, ["steward"]);
  await removeMember(made.as("steward"), second.id);
  await expect(invite(stale, { email: newMail(), name: "X", roles: ["steward"] })).rejects.toThrow(
    ForbiddenError,
  );
  await expect(removeMember(stale, made.people.builder.id)).rejects.toThrow(ForbiddenError);
});

test.each(everyRole.filter((role) => role !== "steward"))("a %s manages nobody", async (role) => {
  const { as, people } = await makeWorkshop(db);
  await expect(invite(as(role), { email: newMail(), name: "X", roles: ["steward"] })).rejects.toThrow(
    ForbiddenError,
  );
  await expect(removeMember(as(role), people.builder.id)).rejects.toThrow(ForbiddenError);
  await expect(
    changeRoles(as(role), people[role].id, { expected: [role], roles: [role, "steward"] }),
  ).rejects.toThrow(ForbiddenError);
});

test("nothing of another workshop can be seen or changed", async () => {
  const [ours, theirs] = [await makeWorkshop(db), await makeWorkshop(db)];
  const steward = ours.as("steward");
  const foreign = theirs.people.builder.id;
  expect(await findWorkshop(db, theirs.workshop.slug, ours.people.steward.id)).toBeNull();
  expect((await listMembers(steward)).map(({ id }) => id)).not.toContain(foreign);
  await expect(getMember(steward, foreign)).rejects.toThrow(NotFoundError);
  await expect(removeMember(steward, foreign)).rejects.toThrow(NotFoundError);
  await expect(changeRoles(steward, foreign, { expected: ["builder"], roles: ["steward"] })).rejects.toThrow(
    NotFoundError,
  );

  const email = newMail();
  await invite(theirs.as("steward"), { email, name: "X", roles: ["builder"] });
  const [invitation] = await listInvitations(theirs.as("steward"));
  expect(await listInvitations(steward)).toEqual([]);
  await expect(cancelInvitation(steward, invitation?.id ?? 0)).rejects.toThrow(NotFoundError);
  await expect(resendInvitation(steward, invitation?.id ?? 0)).rejects.toThrow(NotFoundError);

  const licence = await makeLicence(db, theirs);
  expect(await listLicences(steward)).toEqual([]);
  await expect(revokeLicence(steward, licence)).rejects.toThrow(NotFoundError);
  expect(await trail(ours.workshop.id)).toEqual([]);
});

test("search finds members by name and mail", async () => {
  const made = await makeWorkshop(db);
  const person = await makeMember(db, made, ["builder", "inspector"], { name: "Zoë Quist" });
  const steward = made.as("steward");
  expect(await listMembers(steward, "QUIST")).toMatchObject([
    { id: person.id, roles: ["builder", "inspector"] },
  ]);
  expect(await listMembers(steward, person.email.slice(0, -8))).toMatchObject([{ id: person.id }]);
  expect(await listMembers(steward, "%")).toEqual([]);
});

test("a licence counts within its dates and scope until it is revoked", async () => {
  const { as, workshop, people } = await makeWorkshop(db);
  const { id: personId } = people.electrician;
  const lamp = { supplyVolts: 230, hasBattery: false };
  const fit = async (day: string, need = lamp) =>
    fitLicence(await licencesOf(db, workshop.id, personId), need, day);
  expect(await fit("2026-05-04")).toMatchObject({ kind: "not-in-date" });
  const id = await addLicence(as("steward"), {
    personId,
    holderName: "Tess Electrician",
    number: "L-1",
    authority: "Authority",
    validFrom: "2026-01-01",
    validTo: "2026-05-03",
    maxSupplyVolts: 230,
    coversBatteries: false,
  });
  expect(await fit("2026-05-03")).toMatchObject({
    kind: "fits",
    licence: { id, holderName: "Tess Electrician" },
  });
  expect(await fit("2026-05-04")).toMatchObject({
    kind: "not-in-date",
    reasons: [expect.stringContaining("lapsed")],
  });
  expect(await fit("2026-05-03", { supplyVolts: 230, hasBattery: true })).toMatchObject({
    kind: "not-in-scope",
  });
  await revokeLicence(as("steward"), id);
  expect(await fit("2026-05-03")).toMatchObject({
    kind: "not-in-date",
    reasons: [expect.stringContaining("revoked")],
  });
  await revokeLicence(as("steward"), id);
  expect((await trail(workshop.id)).map(({ act }) => act)).toEqual(["licence.add", "licence.revoke"]);
});

test("only an electrician of the workshop gets a licence, and a number only once", async () => {
  const made = await makeWorkshop(db);
  const input = {
    personId: made.people.electrician.id,
    holderName: "Tess Electrician",
    number: "L-2",
    authority: "Authority",
    validFrom: "2026-01-01",
    validTo: "2026-12-31",
    maxSupplyVolts: 230,
    coversBatteries: false,
  };
  await addLicence(made.as("steward"), input);
  await expect(addLicence(made.as("steward"), input)).rejects.toMatchObject({ field: "number" });
  await expect(
    addLicence(made.as("steward"), { ...input, number: "L-3", personId: made.people.builder.id }),
  ).rejects.toMatchObject({ field: "personId" });
  await expect(addLicence(made.as("electrician"), { ...input, number: "L-4" })).rejects.toThrow(
    ForbiddenError,
  );
  expect(await listLicences(made.as("steward"))).toMatchObject([
    { number: "L-2", holderName: "Tess Electrician", account: "Test electrician" },
  ]);
});

test("who renames themselves is told of in the trail of each workshop that they belong to, without the names", async () => {
  const first = await makeWorkshop(db);
  const second = await makeWorkshop(db);
  const foreign = await makeWorkshop(db);
  const person = await makeMember(db, first, ["builder", "inspector"], { name: "Nadia Before" });
  await grantRoles(db, second.workshop.id, person.id, ["builder"]);
  await renamePerson(db, person.id, "Nadia After", now);
  await renamePerson(db, person.id, "Nadia After", now);
  for (const { workshop } of [first, second]) {
    const entries = await trail(workshop.id);
    expect(entries.map(({ act }) => act)).toEqual(["person.rename"]);
    expect(JSON.stringify(entries)).not.toContain("Nadia");
    expect(entries[0]?.detail).toMatchObject({ person: person.id, after: sha256("Nadia After") });
  }
  expect(await trail(foreign.workshop.id)).toEqual([]);
  const [row] = await db.select().from(tables.people).where(eq(tables.people.id, person.id));
  expect(row?.name).toBe("Nadia After");
});
