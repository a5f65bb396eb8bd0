import { and, asc, eq } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { verifyTrail } from "~/services/audit/verify-trail.server";
import { reclaimUnit, takeUnit } from "~/services/bench/bench-turns.server";
import { database } from "~/services/database.server";
import { ForbiddenError } from "~/services/errors";
import { createUnit } from "~/services/units/create-unit.server";
import { discardUnit } from "~/services/units/discard-unit.server";
import { succeedUnit } from "~/services/units/succeed-unit.server";
import { unitNow } from "../fixtures/bench";
import { grantRoles, makeUnit, makeWorkshop, type TestWorkshop } from "../fixtures/workshop";

const db = database();

const details = {
  name: "One of many",
  purpose: "Made at the same moment as others",
  placeOfUse: "Indoors",
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I" as const,
  cordLengthM: null,
  cordAreaMm2: null,
  handheld: null,
  altitudeM: null,
};

const five = [1, 2, 3, 4, 5];

test("twenty acts of a workshop at the same moment all land, one after another in its trail", async () => {
  const workshop = await makeWorkshop(db);
  const inState = (state: "submitted" | "on_bench" | "refused") =>
    Promise.all(five.map(() => makeUnit(db, workshop, { state })));
  const [submitted, onBench, refused] = [
    await inState("submitted"),
    await inState("on_bench"),
    await inState("refused"),
  ];
  // The workshop's counter stands at 1, where the units of the fixtures have numbers already.
  await db
    .update(tables.workshops)
    .set({ nextUnitNumber: 1_000_000 })
    .where(eq(tables.workshops.id, workshop.workshop.id));

  const outcomes = await Promise.allSettled([
    ...submitted.map(({ number }) => takeUnit(workshop.as("inspector"), { unitNumber: number })),
    ...onBench.map(({ number }) =>
      reclaimUnit(workshop.as("steward"), { unitNumber: number, reason: "The bench is being moved." }),
    ),
    ...refused.map(({ number }) => succeedUnit(workshop.as("builder"), { unitNumber: number })),
    ...five.map(() => createUnit(workshop.as("builder"), details)),
  ]);
  expect(outcomes.filter(({ status }) => status === "rejected")).toEqual([]);

  const entries = await db
    .select()
    .from(tables.auditEntries)
    .where(eq(tables.auditEntries.workshopId, workshop.workshop.id))
    .orderBy(asc(tables.auditEntries.sequence));
  // A successor is entered twice: with the old unit and with the new one.
  expect(entries.map(({ sequence }) => sequence)).toEqual(
    Array.from({ length: 25 }, (_, index) => index + 1),
  );
  const times = (act: string) => entries.filter((entry) => entry.act === act).length;
  expect([times("unit.take"), times("unit.reclaim"), times("unit.succeed"), times("unit.create")]).toEqual([
    5, 5, 5, 10,
  ]);
  expect(await verifyTrail(db, workshop.workshop.id)).toMatchObject({ sound: true, entries: 25 });
  const made = await db
    .select({ number: tables.units.number })
    .from(tables.units)
    .where(and(eq(tables.units.workshopId, workshop.workshop.id), eq(tables.units.state, "draft")))
    .orderBy(asc(tables.units.number));
  expect(made.map(({ number }) => number)).toEqual(
    Array.from({ length: 10 }, (_, index) => 1_000_000 + index),
  );
});

describe("roles that were taken while a request was under way", () => {
  const take = ({ workshop, people }: TestWorkshop, role: "builder" | "inspector") =>
    db
      .delete(tables.memberships)
      .where(
        and(
          eq(tables.memberships.workshopId, workshop.id),
          eq(tables.memberships.personId, people[role].id),
          eq(tables.memberships.role, role),
        ),
      );

  test("allow no transition, no act and no new unit any more", async () => {
    const workshop = await makeWorkshop(db);
    const [inspector, builder] = [workshop.as("inspector"), workshop.as("builder")];
    const submitted = await makeUnit(db, workshop, { state: "submitted" });
    const draft = await makeUnit(db, workshop, { state: "draft" });
    await take(workshop, "inspector");
    await take(workshop, "builder");
    await expect(takeUnit(inspector, { unitNumber: submitted.number })).rejects.toThrow(ForbiddenError);
    await expect(discardUnit(builder, { unitNumber: draft.number })).rejects.toThrow(ForbiddenError);
    await expect(createUnit(builder, details)).rejects.toThrow(ForbiddenError);
    expect((await unitNow(inspector, submitted.number)).state).toBe("submitted");
  });

  test("are missed by nobody who was given them meanwhile", async () => {
    const workshop = await makeWorkshop(db);
    const { number } = await makeUnit(db, workshop, { state: "submitted" });
    const archivist = workshop.as("archivist");
    await grantRoles(db, workshop.workshop.id, archivist.person.id, ["inspector"]);
    await takeUnit(archivist, { unitNumber: number });
    expect((await unitNow(archivist, number)).inspectorId).toBe(archivist.person.id);
  });
});
