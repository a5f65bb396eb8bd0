import { and, eq } from "drizzle-orm";
import { expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { releaseUnit, takeUnit } from "~/services/bench/bench-turns.server";
import { countQueues } from "~/services/bench/queue-counts.server";
import { loadSheet } from "~/services/bench/load-sheet.server";
import { listOwnBench, loadQueue, type QueueFilter } from "~/services/bench/queue.server";
import { database } from "~/services/database.server";
import { ConflictError, ForbiddenError, NotFoundError } from "~/services/errors";
import { answerAll, makeBench, starterMap, unitNow } from "../fixtures/bench";
import { grantRoles, makeMember, makeUnit, makeWorkshop } from "../fixtures/workshop";

const db = database();

test("of two inspectors who take a unit at the same moment one gets it and the other is told the name", async () => {
  for (let round = 0; round < 8; round++) {
    const workshop = await makeWorkshop(db);
    const { number, id } = await makeUnit(db, workshop, { state: "submitted" });
    const second = await makeMember(db, workshop, ["inspector"], { name: "Ines Second" });
    const contexts = [workshop.as("inspector"), workshop.asPerson(second, ["inspector"])];
    const results = await Promise.allSettled(
      contexts.map((context) => takeUnit(context, { unitNumber: number, expectedVersion: 1 })),
    );
    const winners = results.flatMap((result, index) =>
      result.status === "fulfilled" ? [contexts[index]] : [],
    );
    const losses = results.flatMap((result) => (result.status === "rejected" ? [result.reason] : []));
    expect(winners).toHaveLength(1);
    expect(losses[0]).toBeInstanceOf(ConflictError);
    expect(String(losses[0])).toContain(winners[0]?.person.name);
    expect(await unitNow(workshop.as("inspector"), number)).toMatchObject({
      state: "on_bench",
      inspectorId: winners[0]?.person.id,
      version: 2,
    });
    expect(await db.select().from(tables.benchTurns).where(eq(tables.benchTurns.unitId, id))).toHaveLength(1);
    const entries = await db.select().from(tables.auditEntries).where(eq(tables.auditEntries.unitId, id));
    expect(entries.map(({ act }) => act)).toEqual(["unit.take"]);
    const mails = await db
      .select()
      .from(tables.outbox)
      .where(and(eq(tables.outbox.workshopId, workshop.workshop.id)));
    expect(mails.map(({ recipient }) => recipient)).toEqual([workshop.people.builder.email]);
  }
});

test("nobody takes what they built, though they are an inspector too", async () => {
  const workshop = await makeWorkshop(db);
  const { number } = await makeUnit(db, workshop, { state: "submitted" });
  await grantRoles(db, workshop.workshop.id, workshop.people.builder.id, ["inspector"]);
  const both = workshop.asPerson(workshop.people.builder, ["builder", "inspector"]);
  await expect(takeUnit(both, { unitNumber: number })).rejects.toThrow("You built this unit");
  expect((await unitNow(both, number)).state).toBe("submitted");
});

test("a unit put back can be taken by another inspector; both stay among those who inspected it", async () => {
  const bench = await makeBench(db);
  const inspector = bench.as("inspector");
  const other = bench.asPerson(await makeMember(db, bench, ["inspector"]), ["inspector"]);
  await expect(releaseUnit(other, { unitNumber: bench.unit.number })).rejects.toThrow(ForbiddenError);
  await releaseUnit(inspector, { unitNumber: bench.unit.number, expectedVersion: 1 });
  expect(await unitNow(inspector, bench.unit.number)).toMatchObject({
    state: "submitted",
    inspectorId: null,
  });
  await takeUnit(other, { unitNumber: bench.unit.number });
  const unit = await unitNow(inspector, bench.unit.number);
  expect(unit.inspectorId).toBe(other.person.id);
  expect([...unit.inspectorIds].sort()).toEqual([inspector.person.id, other.person.id].sort());
});

test("a form made from an older version takes nothing", async () => {
  const workshop = await makeWorkshop(db);
  const { number } = await makeUnit(db, workshop, { state: "submitted", version: 5 });
  const stale = takeUnit(workshop.as("inspector"), { unitNumber: number, expectedVersion: 4 });
  await expect(stale).rejects.toThrow(ConflictError);
  expect((await unitNow(workshop.as("inspector"), number)).state).toBe("submitted");
});

test("another workshop's unit isn't there", async () => {
  const here = await makeWorkshop(db);
  const { number } = await makeUnit(db, here, { state: "submitted" });
  const elsewhere = await makeWorkshop(db);
  await expect(takeUnit(elsewhere.as("inspector"), { unitNumber: number })).rejects.toThrow(NotFoundError);
});

const everything: QueueFilter = {
  state: "all",
  text: "",
  battery: "any",
  sort: { by: "number", direction: "asc" },
  page: 1,
  pageSize: 10,
};

test("the queue filters, sorts and pages within the workshop alone", async () => {
  const workshop = await makeWorkshop(db);
  const inspector = workshop.as("inspector");
  const other = await makeMember(db, workshop, ["builder"], { name: "Zoe 100% Builder" });
  const submitted = { state: "submitted" as const };
  await makeUnit(db, workshop, { ...submitted, number: 1, name: "Lamp", map: starterMap("mains-led-lamp") });
  await makeUnit(db, workshop, {
    ...submitted,
    number: 2,
    name: "Box",
    map: starterMap("battery-backup-box"),
  });
  await makeUnit(db, workshop, {
    ...submitted,
    number: 3,
    name: "Amp",
    builderId: other.id,
    supplyVolts: 120,
  });
  await makeUnit(db, workshop, { state: "on_bench", number: 4, name: "Motor" });
  await makeUnit(db, workshop, { state: "draft", number: 5, name: "Draft" });
  await makeUnit(db, await makeWorkshop(db), { ...submitted, name: "Foreign" });

  const numbers = async (filter: Partial<QueueFilter>) =>
    (await loadQueue(inspector, { ...everything, ...filter })).rows.map(({ number }) => number);
  expect(await numbers({})).toEqual([1, 2, 3, 4]);
  expect(await numbers({ state: "submitted" })).toEqual([1, 2, 3]);
  expect(await numbers({ state: "on_bench" })).toEqual([4]);
  expect(await numbers({ battery: "yes" })).toEqual([2]);
  expect(await numbers({ battery: "no", state: "submitted" })).toEqual([1, 3]);
  expect(await numbers({ text: "amp" })).toEqual([1, 3]);
  expect(await numbers({ text: "zoe" })).toEqual([3]);
  // A percent sign is looked for, not a wildcard.
  expect(await numbers({ text: "%" })).toEqual([3]);
  expect(await numbers({ text: "2" })).toEqual([2]);
  expect(await numbers({ sort: { by: "name", direction: "desc" } })).toEqual([4, 1, 2, 3]);
  expect(await numbers({ sort: { by: "supply", direction: "asc" } })).toEqual([3, 1, 2, 4]);
  const second = await loadQueue(inspector, { ...everything, page: 2, pageSize: 3 });
  expect(second).toMatchObject({ total: 4, page: 2, rows: [{ number: 4 }] });
  expect(await loadQueue(inspector, { ...everything, page: 99, pageSize: 3 })).toEqual(second);
});

test("own units stand apart with their progress, and the counts tell each person what waits for them", async () => {
  const bench = await makeBench(db);
  await makeUnit(db, bench, { state: "submitted" });
  await makeUnit(db, bench, { state: "submitted", builderId: bench.people.inspector.id });
  await makeUnit(db, bench, { state: "awaiting_signature" });
  await makeUnit(db, bench, { state: "sent_back" });
  const inspector = bench.as("inspector");
  expect(await listOwnBench(inspector)).toMatchObject([
    { number: bench.unit.number, progress: { decided: 0 } },
  ]);
  expect((await countQueues(inspector)).yours).toEqual({
    toInspect: 1,
    onBench: 1,
    toSign: 0,
    sentBack: 0,
    drafts: 0,
  });
  expect((await countQueues(bench.as("electrician"))).yours.toSign).toBe(1);
  // The inspector of the unit may not sign it, though they hold the licence's role.
  const inspectorWhoSigns = bench.asPerson(bench.people.inspector, ["inspector", "electrician"]);
  expect((await countQueues(inspectorWhoSigns)).yours.toSign).toBe(0);
  const counts = await countQueues(bench.as("builder"));
  expect(counts.yours).toMatchObject({ sentBack: 1, drafts: 0, toInspect: 0 });
  expect(counts.states).toMatchObject({
    submitted: 2,
    on_bench: 1,
    awaiting_signature: 1,
    sent_back: 1,
    draft: 0,
  });
});

test("however many units are on the bench, their progress is that of their sheets and takes as many queries", async () => {
  const bench = await makeBench(db);
  await answerAll(db, bench);
  const inspector = bench.as("inspector");
  const queries = async () => {
    let count = 0;
    const counting = new Proxy(db, {
      get(target, key) {
        if (key === "select") count++;
        return Reflect.get(target, key);
      },
    });
    const units = await listOwnBench({ ...inspector, db: counting });
    return { count, units };
  };
  const one = await queries();
  await makeUnit(db, bench, { state: "on_bench", map: starterMap("battery-backup-box") });
  await makeUnit(db, bench, { state: "on_bench", map: starterMap("mains-led-lamp") });
  const three = await queries();
  expect(three.units).toHaveLength(3);
  for (const { number, progress } of three.units) {
    const sheet = await loadSheet(inspector, await unitNow(inspector, number));
    expect(progress).toEqual(sheet.progress);
  }
  expect(three.units.find(({ number }) => number === bench.unit.number)?.progress.decided).toBeGreaterThan(5);
  expect(three.count).toBe(one.count);
});
