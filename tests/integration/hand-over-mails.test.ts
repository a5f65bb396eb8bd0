import { eq } from "drizzle-orm";
import { expect, test } from "vitest";
import type { SignedInPerson } from "~/context";
import { tables } from "~/db/client.server";
import { takeUnit } from "~/services/bench/bench-turns.server";
import { database } from "~/services/database.server";
import { mailFrom, recipientsOf } from "~/services/mail/hand-over.server";
import { removeMember } from "~/services/people/members.server";
import { type TransitionName, transitions } from "~/workflow/transitions";
import { unitNow } from "../fixtures/bench";
import { grantRoles, makeMember, makeUnit, makeWorkshop } from "../fixtures/workshop";

const db = database();

/**
 * Everybody holds more roles than one where that could make a mail too many: the builder inspects and signs other
 * people's units, the unit's inspector signs too.
 */
async function makeCast() {
  const workshop = await makeWorkshop(db);
  const { people } = workshop;
  const more = (person: SignedInPerson, ...roles: ("inspector" | "electrician")[]) =>
    grantRoles(db, workshop.workshop.id, person.id, roles);
  await more(people.builder, "inspector", "electrician");
  await more(people.inspector, "electrician");
  const second = await makeMember(db, workshop, ["inspector"], { name: "Second inspector" });
  const both = await makeMember(db, workshop, ["inspector", "electrician"], { name: "Inspects and signs" });
  const { number } = await makeUnit(db, workshop, { state: "on_bench" });
  const cast = { ...people, second, both };
  const nameOf = (id: number) => Object.entries(cast).find(([, person]) => person.id === id)?.[0];
  return { workshop, cast, number, nameOf };
}

type Who = keyof Awaited<ReturnType<typeof makeCast>>["cast"];

/** Written out by hand, for a unit that the inspector had on the bench. */
const expected: Record<TransitionName, { by: Who; told: string[] }> = {
  submit: { by: "builder", told: ["both as inspectors", "inspector as inspectors", "second as inspectors"] },
  take: { by: "second", told: ["builder as builder"] },
  release: { by: "inspector", told: [] },
  reclaim: { by: "steward", told: ["inspector as inspector"] },
  finish: { by: "inspector", told: ["both as signers", "builder as builder", "electrician as signers"] },
  sendBackFromBench: { by: "inspector", told: ["builder as builder"] },
  sendBackFromReview: { by: "electrician", told: ["builder as builder", "inspector as inspector"] },
  sign: { by: "electrician", told: ["builder as builder", "inspector as inspector"] },
  refuse: { by: "electrician", told: ["builder as builder", "inspector as inspector"] },
  withdraw: {
    by: "electrician",
    told: ["both as electricians", "builder as builder", "inspector as inspector"],
  },
  supersede: { by: "electrician", told: ["builder as builder"] },
};

test("every transition tells those in its row, each once and never who acts", async () => {
  const { workshop, cast, number, nameOf } = await makeCast();
  const unit = await unitNow(workshop.as("steward"), number);
  const names = Object.keys(transitions) as TransitionName[];
  for (const name of names) {
    const context = workshop.asPerson(cast[expected[name].by], []);
    const told = await db.transaction((tx) => recipientsOf(context, tx, name, unit));
    expect(told.map((person) => `${nameOf(person.id)} as ${person.as}`).sort(), name).toEqual(
      expected[name].told,
    );
  }
});

test("who withdraws is told nothing, though they inspected the unit; the other electricians are", async () => {
  const { workshop, cast, number, nameOf } = await makeCast();
  const unit = await unitNow(workshop.as("steward"), number);
  const context = workshop.asPerson(cast.inspector, []);
  const told = await db.transaction((tx) => recipientsOf(context, tx, "withdraw", unit));
  expect(told.map(({ id }) => nameOf(id)).sort()).toEqual(["both", "builder", "electrician"]);
});

test("who has left the workshop is told nothing of it", async () => {
  const { workshop, cast } = await makeCast();
  const second = workshop.asPerson(cast.second, ["inspector"]);
  const mailsToBuilder = () =>
    db.select().from(tables.outbox).where(eq(tables.outbox.recipient, cast.builder.email));
  const before = await makeUnit(db, workshop, { state: "submitted" });
  await takeUnit(second, { unitNumber: before.number });
  expect(await mailsToBuilder()).toHaveLength(1);
  await removeMember(workshop.as("steward"), cast.builder.id);
  const after = await makeUnit(db, workshop, { state: "submitted" });
  await takeUnit(second, { unitNumber: after.number });
  expect(await mailsToBuilder()).toHaveLength(1);
});

test("a mail says whose it is, and that a demo is one", async () => {
  const demo = await makeWorkshop(db, { isDemo: true, name: "Shed" });
  expect(mailFrom(demo.as("builder"))).toBe("Shed (demo: invented people and units)");
  const real = await makeWorkshop(db, { name: "Hall" });
  expect(mailFrom(real.as("builder"))).toBe("Hall");
});
