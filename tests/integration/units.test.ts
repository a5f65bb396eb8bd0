import { and, eq } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { emptyMap, type EnergyMap } from "~/engine/energy-map";
import { mapOf, part } from "~/engine/map-builder";
import { database } from "~/services/database.server";
import { ConflictError, ForbiddenError, GuardError, NotFoundError } from "~/services/errors";
import { findUnit } from "~/services/unit-act.server";
import { answerFinding } from "~/services/units/answer-finding.server";
import { createUnit } from "~/services/units/create-unit.server";
import { discardUnit } from "~/services/units/discard-unit.server";
import { editDetails } from "~/services/units/edit-details.server";
import { listUnits, UNITS_PER_PAGE, type UnitQuery } from "~/services/units/list-units.server";
import { loadOverview } from "~/services/units/load-overview.server";
import { listRevisions, loadRevision } from "~/services/units/load-revision.server";
import { loadRework } from "~/services/units/load-rework.server";
import { MapConflictError, saveMap } from "~/services/units/save-map.server";
import { startRevision } from "~/services/units/start-revision.server";
import { submitUnit } from "~/services/units/submit-unit.server";
import type { UnitDetails } from "~/services/units/unit-details";
import { starterMap } from "../fixtures/bench";
import { makeMember, makeUnit, makeWorkshop, type TestWorkshop } from "../fixtures/workshop";

const db = database();

const details: UnitDetails = {
  name: "Bench supply",
  purpose: "Feeds the electronics table",
  placeOfUse: "Indoors, dry",
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 1.8,
  cordAreaMm2: 1,
  handheld: null,
  altitudeM: null,
};

async function unitNow({ workshop }: TestWorkshop, number: number) {
  const unit = await findUnit(db, workshop.id, number);
  if (!unit) throw new Error("The unit is gone.");
  return unit;
}

async function actsOf(unitId: number) {
  const entries = await db.select().from(tables.auditEntries).where(eq(tables.auditEntries.unitId, unitId));
  return entries.map(({ act }) => act);
}

const named = (label: string): EnergyMap => mapOf([part("fuse", "F1", label)], []);

/** A unit on revision 2, sent back with findings; returns the findings' ids. */
async function sentBack(workshop: TestWorkshop, findings = 1) {
  const unit = await makeUnit(db, workshop, { state: "sent_back", map: starterMap("linear-bench-supply") });
  const row = await unitNow(workshop, unit.number);
  await db.transaction(async (tx) => {
    const revision = await startRevision(tx, row, workshop.clock.at, {
      reason: "The lid has no earth.",
      byId: workshop.people.inspector.id,
    });
    await tx.update(tables.units).set({ revision }).where(eq(tables.units.id, unit.id));
  });
  const ids: number[] = [];
  for (let number = 1; number <= findings; number++) {
    const [finding] = await db
      .insert(tables.findings)
      .values({
        unitId: unit.id,
        revisionId: unit.revisionId,
        number,
        severity: "defect",
        text: `Finding number ${number}`,
        raisedById: workshop.people.inspector.id,
        raisedAt: workshop.clock.at,
      })
      .$returningId();
    if (finding) ids.push(finding.id);
  }
  return { ...unit, findings: ids };
}

describe("creating and describing", () => {
  test("gives numbers in order, also when many are made at once, and an empty first revision", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const numbers = await Promise.all(Array.from({ length: 6 }, () => createUnit(builder, details)));
    expect(numbers.toSorted((a, b) => a - b)).toEqual([1, 2, 3, 4, 5, 6]);
    const unit = await unitNow(workshop, 3);
    expect(unit).toMatchObject({ state: "draft", revision: 1, builderId: builder.person.id, handheld: null });
    const revision = await loadRevision(db, unit);
    expect(revision).toMatchObject({ number: 1, map: emptyMap, submittedAt: null, mapEdition: 1 });
    expect(revision.facts).toMatchObject({ supplyVolts: 230, cordLengthM: 1.8, altitudeM: null });
    expect(await actsOf(unit.id)).toEqual(["unit.create"]);
  });

  test("is for builders; and changing it for its own builder, while it is a draft or sent back", async () => {
    const workshop = await makeWorkshop(db);
    for (const role of ["inspector", "electrician", "archivist", "steward"] as const) {
      await expect(async () => createUnit(workshop.as(role), details)).rejects.toThrow(ForbiddenError);
    }
    const second = await makeMember(db, workshop, ["builder"]);
    const { number } = await makeUnit(db, workshop);
    const input = { unitNumber: number, details };
    await expect(editDetails(workshop.asPerson(second, ["builder"]), input)).rejects.toThrow(ForbiddenError);
    const submitted = await makeUnit(db, workshop, { state: "submitted" });
    await expect(
      editDetails(workshop.as("builder"), { unitNumber: submitted.number, details }),
    ).rejects.toThrow(ForbiddenError);
  });

  test("a stale form is told who acted, and changes nothing", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const { number } = await makeUnit(db, workshop);
    await editDetails(builder, { unitNumber: number, expectedVersion: 1, details });
    const stale = editDetails(builder, {
      unitNumber: number,
      expectedVersion: 1,
      details: { ...details, name: "Another name" },
    });
    await expect(stale).rejects.toThrow(ConflictError);
    await expect(stale).rejects.toThrow(/Test builder acted/);
    expect((await unitNow(workshop, number)).name).toBe("Bench supply");
  });

  test("a unit of another workshop isn't there", async () => {
    const own = await makeWorkshop(db);
    const foreign = await makeWorkshop(db);
    const { number } = await makeUnit(db, foreign);
    const builder = own.as("builder");
    const target = { unitNumber: number };
    await expect(editDetails(builder, { ...target, details })).rejects.toThrow(NotFoundError);
    await expect(submitUnit(builder, target)).rejects.toThrow(NotFoundError);
    await expect(discardUnit(builder, target)).rejects.toThrow(NotFoundError);
    await expect(saveMap(builder, { ...target, revision: 1, edition: 1, map: emptyMap })).rejects.toThrow(
      NotFoundError,
    );
  });
});

describe("drafting the map", () => {
  test("saves one draft row, counts its editions and leaves the trail alone", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const { number, id } = await makeUnit(db, workshop);
    const first = await saveMap(builder, { unitNumber: number, revision: 1, edition: 1, map: named("a") });
    expect(first.edition).toBe(2);
    const second = await saveMap(builder, { unitNumber: number, revision: 1, edition: 2, map: named("b") });
    const unit = await unitNow(workshop, number);
    expect(second.version).toBe(unit.version);
    expect((await loadRevision(db, unit)).map).toEqual(named("b"));
    expect(await listRevisions(db, id)).toHaveLength(1);
    expect(await actsOf(id)).toEqual([]);
  });

  test("of two windows the second is told, gets the other map, and can save over it knowingly", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const { number } = await makeUnit(db, workshop);
    await saveMap(builder, { unitNumber: number, revision: 1, edition: 1, map: named("first window") });
    const late = await saveMap(builder, {
      unitNumber: number,
      revision: 1,
      edition: 1,
      map: named("second window"),
    }).catch((error: unknown) => error);
    expect(late).toBeInstanceOf(MapConflictError);
    expect(late).toMatchObject({ status: 409, theirs: named("first window"), edition: 2 });
    expect((await loadRevision(db, await unitNow(workshop, number))).map).toEqual(named("first window"));
    await saveMap(builder, { unitNumber: number, revision: 1, edition: 2, map: named("second window") });
    expect((await loadRevision(db, await unitNow(workshop, number))).map).toEqual(named("second window"));
  });

  test("truly at the same moment exactly one of two is kept, and the other is told", async () => {
    for (let round = 0; round < 6; round++) {
      const workshop = await makeWorkshop(db);
      const { number } = await makeUnit(db, workshop);
      const results = await Promise.allSettled(
        ["one", "two"].map((label) =>
          saveMap(workshop.as("builder"), { unitNumber: number, revision: 1, edition: 1, map: named(label) }),
        ),
      );
      const kept = results.findIndex((result) => result.status === "fulfilled");
      const lost = results.find((result) => result.status === "rejected");
      expect(results.filter((result) => result.status === "fulfilled")).toHaveLength(1);
      expect(lost?.reason).toBeInstanceOf(MapConflictError);
      expect((await loadRevision(db, await unitNow(workshop, number))).map).toEqual(
        named(["one", "two"][kept] ?? ""),
      );
    }
  });

  test("facts and photos changed meanwhile are no conflict for the map", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const { number } = await makeUnit(db, workshop);
    await editDetails(builder, { unitNumber: number, details });
    await expect(
      saveMap(builder, { unitNumber: number, revision: 1, edition: 1, map: named("a") }),
    ).resolves.toMatchObject({ edition: 2 });
  });

  test("an editor of an earlier revision, or of a submitted unit, is refused", async () => {
    const workshop = await makeWorkshop(db);
    const { number } = await sentBack(workshop);
    await expect(
      saveMap(workshop.as("builder"), { unitNumber: number, revision: 1, edition: 1, map: named("a") }),
    ).rejects.toThrow(/revision 2 by now/);
    const submitted = await makeUnit(db, workshop, { state: "submitted" });
    await expect(
      saveMap(workshop.as("builder"), {
        unitNumber: submitted.number,
        revision: 1,
        edition: 1,
        map: named("a"),
      }),
    ).rejects.toThrow(ForbiddenError);
  });
});

describe("submitting", () => {
  test("freezes map, facts and rule set, and tells every inspector but the builder, in one act", async () => {
    const workshop = await makeWorkshop(db);
    const second = await makeMember(db, workshop, ["inspector"]);
    // The builder is an inspector too, elsewhere in the workshop: no mail to oneself.
    await db.insert(tables.memberships).values({
      workshopId: workshop.workshop.id,
      personId: workshop.people.builder.id,
      role: "inspector",
      grantedAt: workshop.clock.at,
    });
    const { number, id } = await makeUnit(db, workshop, { map: starterMap("linear-bench-supply") });
    await submitUnit(workshop.as("builder"), { unitNumber: number, expectedVersion: 1 });
    const unit = await unitNow(workshop, number);
    expect(unit).toMatchObject({ state: "submitted", revision: 1, version: 2 });
    const [row] = await db.select().from(tables.revisions).where(eq(tables.revisions.unitId, id));
    expect(row).toMatchObject({ ruleSetKey: workshop.workshop.ruleSetKey, submittedAt: workshop.clock.at });
    expect(row?.facts).toMatchObject({ supplyVolts: 230, protectionClass: "I" });
    const mails = await db
      .select()
      .from(tables.outbox)
      .where(eq(tables.outbox.workshopId, workshop.workshop.id));
    expect(mails.map(({ recipient }) => recipient).sort()).toEqual(
      [workshop.people.inspector.email, second.email].sort(),
    );
    const [entry] = await db.select().from(tables.auditEntries).where(eq(tables.auditEntries.unitId, id));
    expect(entry).toMatchObject({ act: "unit.submit", fromState: "draft", toState: "submitted" });
    expect(entry?.detail.mapSha256).toMatch(/^[0-9a-f]{64}$/);

    // What is said of the unit later does not change what was submitted.
    await db.update(tables.units).set({ supplyVolts: 120 }).where(eq(tables.units.id, id));
    expect((await loadRevision(db, await unitNow(workshop, number))).facts.supplyVolts).toBe(230);
  });

  test("is refused with every reason while the map is incomplete, and changes nothing", async () => {
    const workshop = await makeWorkshop(db);
    const { number, id } = await makeUnit(db, workshop, { map: mapOf([part("fuse", "F1", "")], []) });
    const refusal = await submitUnit(workshop.as("builder"), { unitNumber: number }).catch(
      (error: unknown) => error,
    );
    expect(refusal).toBeInstanceOf(GuardError);
    expect(refusal instanceof GuardError ? refusal.reasons : []).toEqual(
      expect.arrayContaining([
        expect.stringMatching(/No source of energy/),
        "F1 has no name.",
        expect.stringMatching(/^F1: rated current is not known/),
      ]),
    );
    expect(await unitNow(workshop, number)).toMatchObject({ state: "draft", version: 1 });
    expect(await actsOf(id)).toEqual([]);
    expect(
      await db.select().from(tables.outbox).where(eq(tables.outbox.workshopId, workshop.workshop.id)),
    ).toEqual([]);
  });

  test("what was saved last counts, and a form from before it is stale", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const { number } = await makeUnit(db, workshop, { map: starterMap("linear-bench-supply") });
    await saveMap(builder, { unitNumber: number, revision: 1, edition: 1, map: emptyMap });
    await expect(submitUnit(builder, { unitNumber: number, expectedVersion: 1 })).rejects.toThrow(
      ConflictError,
    );
    await expect(submitUnit(builder, { unitNumber: number, expectedVersion: 2 })).rejects.toThrow(GuardError);
  });

  test("a double click submits once", async () => {
    const workshop = await makeWorkshop(db);
    const { number, id } = await makeUnit(db, workshop, {
      map: starterMap("mains-led-lamp"),
      protectionClass: "II",
    });
    const target = { unitNumber: number, expectedVersion: 1 };
    const results = await Promise.allSettled([
      submitUnit(workshop.as("builder"), target),
      submitUnit(workshop.as("builder"), target),
    ]);
    expect(results.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
    expect(await actsOf(id)).toEqual(["unit.submit"]);
    expect(
      await db.select().from(tables.outbox).where(eq(tables.outbox.workshopId, workshop.workshop.id)),
    ).toHaveLength(1);
  });
});

describe("rework", () => {
  test("starts from a copy of the examined map and leaves that one alone", async () => {
    const workshop = await makeWorkshop(db);
    const { number, id } = await sentBack(workshop);
    const unit = await unitNow(workshop, number);
    const examined = starterMap("linear-bench-supply");
    expect((await loadRevision(db, unit)).map).toEqual(examined);
    const changed = { ...examined, elements: examined.elements.slice(1) };
    await saveMap(workshop.as("builder"), { unitNumber: number, revision: 2, edition: 1, map: changed });
    expect((await loadRevision(db, unit, 1)).map).toEqual(examined);
    expect(await listRevisions(db, id)).toMatchObject([
      { number: 1, submittedAt: expect.any(Date) },
      { number: 2, submittedAt: null },
    ]);
    const rework = await loadRework(workshop.as("builder"), await unitNow(workshop, number));
    expect(rework.changes).toMatchObject([
      { subject: "element", id: examined.elements[0]?.id, change: "removed" },
    ]);
  });

  test("can be submitted once every open finding has an answer of this round", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const { number, findings, id } = await sentBack(workshop, 3);
    const [one = 0, two = 0, three = 0] = findings;
    await db
      .update(tables.findings)
      .set({ closedAt: workshop.clock.at, closedById: workshop.people.inspector.id, closingText: "Mended" })
      .where(eq(tables.findings.id, three));
    // An answer of an earlier round is no answer now.
    const [firstRevision] = await listRevisions(db, id);
    await db.insert(tables.findingAnswers).values({
      findingId: two,
      revisionId: firstRevision?.id ?? 0,
      text: "An old answer",
      answeredById: builder.person.id,
      answeredAt: workshop.clock.at,
    });
    await answerFinding(builder, { unitNumber: number, findingId: one, text: "Another fuse is in." });
    await expect(submitUnit(builder, { unitNumber: number })).rejects.toMatchObject({
      reasons: ["Finding 2 has no answer yet."],
    });
    await answerFinding(builder, { unitNumber: number, findingId: two, text: "   " });
    await expect(submitUnit(builder, { unitNumber: number })).rejects.toThrow(GuardError);
    await answerFinding(builder, { unitNumber: number, findingId: two, text: "Moved the lamp." });
    await submitUnit(builder, { unitNumber: number });
    expect(await unitNow(workshop, number)).toMatchObject({ state: "submitted", revision: 2 });
  });

  test("an answer can be changed and taken back until then, and is one row a round", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const { number, findings } = await sentBack(workshop);
    const findingId = findings[0] ?? 0;
    for (const text of ["First words", "Better words"]) {
      await answerFinding(builder, { unitNumber: number, findingId, text });
    }
    const answers = () =>
      db.select().from(tables.findingAnswers).where(eq(tables.findingAnswers.findingId, findingId));
    expect((await answers()).map(({ text }) => text)).toEqual(["Better words"]);
    await answerFinding(builder, { unitNumber: number, findingId, text: "" });
    expect(await answers()).toEqual([]);
  });

  test("a finding of another unit, a closed one and somebody else's unit can't be answered", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const own = await sentBack(workshop);
    const other = await sentBack(workshop);
    await expect(
      answerFinding(builder, { unitNumber: own.number, findingId: other.findings[0] ?? 0, text: "x" }),
    ).rejects.toThrow(NotFoundError);
    await db
      .update(tables.findings)
      .set({ closedAt: workshop.clock.at, closedById: workshop.people.inspector.id })
      .where(and(eq(tables.findings.unitId, own.id)));
    await expect(
      answerFinding(builder, { unitNumber: own.number, findingId: own.findings[0] ?? 0, text: "x" }),
    ).rejects.toThrow(ConflictError);
    await expect(
      answerFinding(workshop.as("inspector"), {
        unitNumber: other.number,
        findingId: other.findings[0] ?? 0,
        text: "x",
      }),
    ).rejects.toThrow(ForbiddenError);
  });
});

describe("discarding", () => {
  test("takes a draft out of every list and address, keeps its rows, and never gives its number again", async () => {
    const workshop = await makeWorkshop(db);
    const builder = workshop.as("builder");
    const number = await createUnit(builder, details);
    const { id } = await unitNow(workshop, number);
    await discardUnit(builder, { unitNumber: number, expectedVersion: 1 });
    expect(await findUnit(db, workshop.workshop.id, number)).toBeNull();
    expect((await listUnits(db, query(workshop))).total).toBe(0);
    expect(await actsOf(id)).toEqual(["unit.create", "unit.discard"]);
    expect(await createUnit(builder, details)).toBe(number + 1);
  });

  test("is over once the unit has been submitted", async () => {
    const workshop = await makeWorkshop(db);
    for (const state of ["submitted", "sent_back", "signed"] as const) {
      const { number } = await makeUnit(db, workshop, { state });
      await expect(discardUnit(workshop.as("builder"), { unitNumber: number })).rejects.toThrow(
        ForbiddenError,
      );
    }
  });
});

function query({ workshop }: TestWorkshop, changes: Partial<UnitQuery> = {}): UnitQuery {
  return {
    workshopId: workshop.id,
    today: "2026-05-04",
    sort: { by: "number", direction: "asc" },
    page: 1,
    ...changes,
  };
}

describe("the list of units", () => {
  test("is the workshop's own, found by words, number, state and builder, with signs taken literally", async () => {
    const workshop = await makeWorkshop(db);
    const foreign = await makeWorkshop(db);
    const second = await makeMember(db, workshop, ["builder"]);
    await makeUnit(db, foreign, { name: "Lamp abroad" });
    const lamp = await makeUnit(db, workshop, { name: "Lamp 100%", state: "signed" });
    const supply = await makeUnit(db, workshop, {
      name: "Supply",
      purpose: "Feeds a lamp",
      builderId: second.id,
    });
    const numbers = async (changes: Partial<UnitQuery>) =>
      (await listUnits(db, query(workshop, changes))).units.map(({ number }) => number);
    expect(await numbers({})).toEqual([lamp.number, supply.number]);
    expect(await numbers({ text: "lamp" })).toEqual([lamp.number, supply.number]);
    expect(await numbers({ text: "100%" })).toEqual([lamp.number]);
    expect(await numbers({ text: "_upply" })).toEqual([]);
    expect(await numbers({ text: `#${supply.number}` })).toEqual([supply.number]);
    expect(await numbers({ states: ["signed", "refused"] })).toEqual([lamp.number]);
    expect(await numbers({ builderId: second.id })).toEqual([supply.number]);
    expect(await numbers({ text: "Lamp abroad" })).toEqual([]);
  });

  test("comes page by page in the order asked for; a page beyond the last is the last", async () => {
    const workshop = await makeWorkshop(db);
    for (let index = 0; index < UNITS_PER_PAGE + 2; index++) {
      await makeUnit(db, workshop, { name: `Unit ${String(99 - index)}` });
    }
    const byName = { by: "name", direction: "asc" } as const;
    const first = await listUnits(db, query(workshop, { sort: byName }));
    const second = await listUnits(db, query(workshop, { sort: byName, page: 2 }));
    expect(first).toMatchObject({ total: UNITS_PER_PAGE + 2, page: 1 });
    expect(second.units).toHaveLength(2);
    const names = [...first.units, ...second.units].map(({ name }) => name);
    expect(names).toEqual(names.toSorted());
    expect((await listUnits(db, query(workshop, { sort: byName, page: 99 }))).page).toBe(2);
  });
});

test("a unit's page offers each person what the permission table allows them", async () => {
  const workshop = await makeWorkshop(db);
  const { number } = await makeUnit(db, workshop, { map: starterMap("linear-bench-supply") });
  const overviewFor = async (role: "builder" | "inspector" | "archivist") =>
    (await loadOverview(workshop.as(role), await unitNow(workshop, number))).may;
  expect(await overviewFor("builder")).toMatchObject({
    edit: true,
    discard: true,
    readSheet: false,
    review: false,
    readRecord: false,
  });
  expect(await overviewFor("inspector")).toMatchObject({ edit: false, discard: false });
  await db.update(tables.units).set({ state: "signed" }).where(eq(tables.units.number, number));
  expect(await overviewFor("archivist")).toMatchObject({ edit: false, readRecord: true });
});
