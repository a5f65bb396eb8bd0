import { and, eq } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { reclaimUnit, takeUnit } from "~/services/bench/bench-turns.server";
import { countQueues } from "~/services/bench/queue-counts.server";
import { database } from "~/services/database.server";
import { ConflictError, ForbiddenError, GuardError } from "~/services/errors";
import { removeMember, unitsInHandsOf } from "~/services/people/members.server";
import { editDetails } from "~/services/units/edit-details.server";
import { handOverUnit, loadHandOver } from "~/services/units/hand-over-unit.server";
import { loadOverview } from "~/services/units/load-overview.server";
import { succeedUnit } from "~/services/units/succeed-unit.server";
import { makeBench, unitNow } from "../fixtures/bench";
import { grantRoles, makeMember, makeUnit, makeWorkshop, type TestWorkshop } from "../fixtures/workshop";

const db = database();

async function mailsTo(workshop: TestWorkshop, email: string) {
  const { outbox } = tables;
  return db
    .select()
    .from(outbox)
    .where(and(eq(outbox.workshopId, workshop.workshop.id), eq(outbox.recipient, email)));
}

const entriesOf = (unitId: number) =>
  db.select().from(tables.auditEntries).where(eq(tables.auditEntries.unitId, unitId));

describe("a unit on the bench of somebody who is absent", () => {
  test("is put back by a steward, with a reason that its inspector is told and the trail leaves out", async () => {
    const bench = await makeBench(db);
    const steward = bench.as("steward");
    const { number, id } = bench.unit;
    await reclaimUnit(steward, { unitNumber: number, expectedVersion: 1, reason: " Away for a month " });

    expect(await unitNow(steward, number)).toMatchObject({
      state: "submitted",
      inspectorId: null,
      inspectorIds: [bench.people.inspector.id],
    });
    const [turn] = await db.select().from(tables.benchTurns).where(eq(tables.benchTurns.unitId, id));
    expect(turn).toMatchObject({ reclaimedById: steward.person.id, reclaimReason: "Away for a month" });
    expect(turn?.endedAt).not.toBeNull();
    const [mail, ...more] = await mailsTo(bench, bench.people.inspector.email);
    expect(more).toEqual([]);
    expect(mail?.text).toContain("Away for a month");
    const [entry] = await entriesOf(id);
    expect(entry).toMatchObject({
      act: "unit.reclaim",
      actorId: steward.person.id,
      fromState: "on_bench",
      toState: "submitted",
    });
    expect(JSON.stringify(entry?.detail)).not.toContain("Away");
    const other = bench.asPerson(await makeMember(db, bench, ["inspector"]), ["inspector"]);
    await takeUnit(other, { unitNumber: number });
    expect((await unitNow(other, number)).inspectorId).toBe(other.person.id);
  });

  test("is not put back without a reason, by anybody else, from an old page, or from another state", async () => {
    const bench = await makeBench(db);
    const { number } = bench.unit;
    const steward = bench.as("steward");
    const reason = "Ill";
    await expect(reclaimUnit(steward, { unitNumber: number, reason: "  " })).rejects.toThrow(GuardError);
    for (const role of ["builder", "inspector", "electrician", "archivist"] as const) {
      await expect(reclaimUnit(bench.as(role), { unitNumber: number, reason })).rejects.toThrow(
        ForbiddenError,
      );
    }
    await expect(reclaimUnit(steward, { unitNumber: number, expectedVersion: 9, reason })).rejects.toThrow(
      ConflictError,
    );
    expect((await unitNow(steward, number)).state).toBe("on_bench");
    const waiting = await makeUnit(db, bench, { state: "awaiting_signature" });
    await expect(reclaimUnit(steward, { unitNumber: waiting.number, reason })).rejects.toThrow(ConflictError);
  });

  test("whose inspector was removed goes back, and a person who has left is written to no more", async () => {
    const bench = await makeBench(db);
    await removeMember(bench.as("steward"), bench.people.inspector.id);
    await reclaimUnit(bench.as("steward"), { unitNumber: bench.unit.number, reason: "Has left" });
    expect(await mailsTo(bench, bench.people.inspector.email)).toEqual([]);
  });
});

describe("a unit whose builder has left", () => {
  const details = {
    name: "Renamed",
    purpose: "Made by a test",
    placeOfUse: "Indoors",
    supplyVolts: 230,
    supplyHertz: 50,
    protectionClass: "I" as const,
    cordLengthM: null,
    cordAreaMm2: null,
    handheld: null,
    altitudeM: null,
  };

  test("is handed to another builder, who goes on with it and is told", async () => {
    const workshop = await makeWorkshop(db);
    const steward = workshop.as("steward");
    const heir = await makeMember(db, workshop, ["builder"], { name: "Hanna Heir" });
    const { number, id } = await makeUnit(db, workshop, { state: "sent_back" });
    expect((await loadOverview(steward, await unitNow(steward, number))).handOver).toBeNull();
    // Whoever removes the builder is told which units wait; decided and discarded ones don't.
    await makeUnit(db, workshop, { state: "signed" });
    await makeUnit(db, workshop, { state: "draft", discardedAt: workshop.clock.at });
    expect(await unitsInHandsOf(steward, workshop.people.builder.id)).toEqual([number]);
    await removeMember(steward, workshop.people.builder.id);
    const { handOver } = await loadOverview(steward, await unitNow(steward, number));
    expect(handOver).toEqual([{ id: heir.id, name: "Hanna Heir" }]);

    await handOverUnit(steward, { unitNumber: number, expectedVersion: 1, toId: heir.id });
    const unit = await unitNow(steward, number);
    expect(unit).toMatchObject({ builderId: heir.id, formerBuilderIds: [workshop.people.builder.id] });
    expect(await mailsTo(workshop, heir.email)).toHaveLength(1);
    expect(await entriesOf(id)).toMatchObject([
      {
        act: "unit.hand-over",
        actorId: steward.person.id,
        detail: { from: workshop.people.builder.id, to: heir.id },
      },
    ]);
    await editDetails(workshop.asPerson(heir, ["builder"]), { unitNumber: number, details });
    expect((await unitNow(steward, number)).name).toBe("Renamed");
  });

  test("never goes to one who inspected it, to no builder, nor while its builder is still there", async () => {
    const bench = await makeBench(db, { state: "sent_back" });
    const steward = bench.as("steward");
    const { number } = bench.unit;
    const heir = await makeMember(db, bench, ["builder"]);
    await expect(handOverUnit(steward, { unitNumber: number, toId: heir.id })).rejects.toThrow(
      "still builds",
    );
    await removeMember(steward, bench.people.builder.id);
    await grantRoles(db, bench.workshop.id, bench.people.inspector.id, ["builder"]);
    for (const person of [bench.people.inspector, bench.people.archivist, bench.people.builder]) {
      await expect(handOverUnit(steward, { unitNumber: number, toId: person.id })).rejects.toThrow(
        GuardError,
      );
    }
    expect((await loadHandOver(db, bench.workshop.id, await unitNow(steward, number))).candidates).toEqual([
      { id: heir.id, name: heir.name },
    ]);
    await expect(
      handOverUnit(bench.asPerson(heir, ["builder"]), { unitNumber: number, toId: heir.id }),
    ).rejects.toThrow(ForbiddenError);
    const submitted = await makeUnit(db, bench, { state: "submitted" });
    await expect(handOverUnit(steward, { unitNumber: submitted.number, toId: heir.id })).rejects.toThrow(
      ForbiddenError,
    );
    await handOverUnit(steward, { unitNumber: number, toId: heir.id });
  });

  test("is inspected and signed by neither of its builders, nor is a new version of it", async () => {
    const workshop = await makeWorkshop(db);
    const steward = workshop.as("steward");
    const left = workshop.people.builder;
    const heir = await makeMember(db, workshop, ["builder"]);
    const { number, id } = await makeUnit(db, workshop, { state: "draft" });
    await removeMember(steward, left.id);
    await handOverUnit(steward, { unitNumber: number, toId: heir.id });
    // Back again, with other roles.
    await grantRoles(db, workshop.workshop.id, left.id, ["inspector", "electrician"]);
    const returned = workshop.asPerson(left, ["inspector", "electrician"]);
    await db.update(tables.units).set({ state: "submitted" }).where(eq(tables.units.id, id));
    await expect(takeUnit(returned, { unitNumber: number })).rejects.toThrow("You built this unit");
    expect((await countQueues(returned)).yours.toInspect).toBe(0);
    await db.update(tables.units).set({ state: "awaiting_signature" }).where(eq(tables.units.id, id));
    expect((await countQueues(returned)).yours.toSign).toBe(0);
    await db.update(tables.units).set({ state: "refused" }).where(eq(tables.units.id, id));
    const next = await succeedUnit(workshop.asPerson(heir, ["builder"]), { unitNumber: number });
    expect((await unitNow(steward, next)).formerBuilderIds).toEqual([left.id]);
  });
});
