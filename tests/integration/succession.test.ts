import { and, eq } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { findPublicRecord } from "~/services/archive/public-record.server";
import { searchRecords } from "~/services/archive/search-records.server";
import { withdrawUnit } from "~/services/archive/withdraw-unit.server";
import { takeUnit } from "~/services/bench/bench-turns.server";
import { finishSheet } from "~/services/bench/finish-sheet.server";
import { database } from "~/services/database.server";
import { ConflictError, ForbiddenError, GuardError } from "~/services/errors";
import { refuseUnit, signUnit } from "~/services/signing/decide-on-unit.server";
import { discardUnit } from "~/services/units/discard-unit.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { submitUnit } from "~/services/units/submit-unit.server";
import { succeedUnit } from "~/services/units/succeed-unit.server";
import { loadVersions } from "~/services/units/versions.server";
import { answerAll, type TestBench, unitNow } from "../fixtures/bench";
import { ADDRESS, makeReviewable, PASSWORD, signInput } from "../fixtures/signing";
import { makeMember, makeUnit, makeWorkshop } from "../fixtures/workshop";

const db = database();

/** A unit that was examined and signed, with its public code. */
async function makeSigned() {
  const bench = await makeReviewable(db);
  const electrician = bench.as("electrician");
  const { publicCode } = await signUnit(electrician, await signInput(electrician, bench.unit.number));
  return { bench, electrician, publicCode };
}

/** Takes a draft through the bench to the electrician, as people would. */
async function bringToSignature(bench: TestBench, number: number): Promise<void> {
  const { id } = await unitNow(bench.as("builder"), number);
  await submitUnit(bench.as("builder"), { unitNumber: number });
  await takeUnit(bench.as("inspector"), { unitNumber: number });
  await answerAll(db, { ...bench, unit: { id, number, revisionId: 0 } });
  await finishSheet(bench.as("inspector"), { unitNumber: number });
}

async function refusal(act: Promise<unknown>): Promise<string> {
  const error: unknown = await act.then(
    () => null,
    (thrown: unknown) => thrown,
  );
  if (!(error instanceof GuardError)) throw new Error(`Not refused by a guard: ${String(error)}`);
  return error.message;
}

const actsOf = async (unitId: number) =>
  db.select().from(tables.auditEntries).where(eq(tables.auditEntries.unitId, unitId));

describe("a new version", () => {
  test("is a unit of its own, with the facts and the map; the old one stays in force until it is signed", async () => {
    const { bench, electrician, publicCode } = await makeSigned();
    const builder = bench.as("builder");
    const old = await unitNow(builder, bench.unit.number);
    const number = await succeedUnit(builder, { unitNumber: old.number, expectedVersion: old.version });

    const begun = await unitNow(builder, number);
    expect(begun).toMatchObject({
      state: "draft",
      revision: 1,
      builderId: builder.person.id,
      inspectorId: null,
      predecessorId: old.id,
      name: old.name,
      supplyVolts: old.supplyVolts,
      protectionClass: old.protectionClass,
    });
    expect(number).toBeGreaterThan(0);
    expect((await loadRevision(db, begun)).map).toEqual((await loadRevision(db, old)).map);
    expect((await unitNow(builder, old.number)).state).toBe("signed");
    expect((await findPublicRecord(db, publicCode, bench.clock.at))?.validity.kind).toBe("may-be-used");
    expect(await loadVersions(db, begun)).toMatchObject({
      predecessor: { number: old.number },
      successors: [],
    });
    expect(await loadVersions(db, old)).toMatchObject({ predecessor: null, successors: [{ number }] });

    await bringToSignature(bench, number);
    expect((await unitNow(builder, old.number)).state).toBe("signed");
    await signUnit(electrician, await signInput(electrician, number));

    expect((await unitNow(builder, number)).state).toBe("signed");
    expect((await unitNow(builder, old.number)).state).toBe("superseded");
    expect(await findPublicRecord(db, publicCode, bench.clock.at)).toMatchObject({
      state: "superseded",
      validity: { kind: "must-not-be-used", because: "superseded" },
    });
    const entry = (await actsOf(old.id)).find(({ act }) => act === "unit.supersede");
    expect(entry).toMatchObject({
      actorId: electrician.person.id,
      fromState: "signed",
      toState: "superseded",
      detail: { successor: number },
    });
    const signing = (await actsOf(begun.id)).find(({ act }) => act === "unit.sign");
    expect(signing).toMatchObject({ detail: { supersedes: [old.number] } });
    const mails = await db
      .select({ recipient: tables.outbox.recipient })
      .from(tables.outbox)
      .where(
        and(
          eq(tables.outbox.workshopId, bench.workshop.id),
          eq(tables.outbox.subject, `Unit ${old.number} was superseded: ${old.name}`),
        ),
      );
    expect(mails).toEqual([{ recipient: bench.people.builder.email }]);
    const found = await searchRecords(bench.as("archivist"), {
      text: "",
      state: "superseded",
      builderId: null,
      signerId: null,
      from: null,
      to: null,
      sort: { by: "number", direction: "asc" },
      page: 1,
      pageSize: 10,
    });
    expect(found.rows.map((row) => row.unitNumber)).toEqual([old.number]);
    // Nothing can be begun from what has been replaced, nor withdrawn there.
    await expect(succeedUnit(builder, { unitNumber: old.number })).rejects.toBeInstanceOf(ForbiddenError);
  });

  test("is refused while another is being worked on, and possible again once that is discarded or refused", async () => {
    const { bench, electrician } = await makeSigned();
    const builder = bench.as("builder");
    const { number: old } = bench.unit;
    const first = await succeedUnit(builder, { unitNumber: old });
    expect(await refusal(succeedUnit(builder, { unitNumber: old }))).toContain(`unit ${first}`);
    await discardUnit(builder, { unitNumber: first });
    const second = await succeedUnit(builder, { unitNumber: old });
    await bringToSignature(bench, second);
    expect(await refusal(succeedUnit(builder, { unitNumber: old }))).toContain("Awaiting signature");
    const { statement, signature, password, address, expectedVersion } = await signInput(electrician, second);
    await refuseUnit(electrician, {
      unitNumber: second,
      statement,
      signature,
      password,
      address,
      expectedVersion,
    });
    // A refusal replaces nothing.
    expect((await unitNow(builder, old)).state).toBe("signed");
    const third = await succeedUnit(builder, { unitNumber: second });
    // One at a time in the whole family, from whichever of its units it is begun.
    expect(await refusal(succeedUnit(builder, { unitNumber: old }))).toContain(`unit ${third}`);
    await bringToSignature(bench, third);
    await signUnit(electrician, await signInput(electrician, third));
    // Through the refused one in between, the first ends.
    expect((await unitNow(builder, old)).state).toBe("superseded");
    expect((await unitNow(builder, second)).state).toBe("refused");
    expect(await refusal(succeedUnit(builder, { unitNumber: second }))).toContain(`Unit ${third}`);
  });

  test("begun twice at the same moment is begun once", async () => {
    for (let round = 0; round < 5; round++) {
      const workshop = await makeWorkshop(db);
      const { number, id } = await makeUnit(db, workshop, { state: "refused" });
      const builder = workshop.as("builder");
      const outcomes = await Promise.allSettled(
        [1, 2, 3].map(() => succeedUnit(builder, { unitNumber: number })),
      );
      expect(outcomes.filter(({ status }) => status === "fulfilled")).toHaveLength(1);
      for (const outcome of outcomes) {
        if (outcome.status === "rejected") expect(outcome.reason).toBeInstanceOf(GuardError);
      }
      expect(await db.select().from(tables.units).where(eq(tables.units.predecessorId, id))).toHaveLength(1);
    }
  });

  test("is its builder's to begin, of a unit that was decided on, from the page as it is now", async () => {
    const workshop = await makeWorkshop(db);
    const { number } = await makeUnit(db, workshop, { state: "withdrawn" });
    const other = await makeMember(db, workshop, ["builder"]);
    await expect(
      succeedUnit(workshop.asPerson(other, ["builder"]), { unitNumber: number }),
    ).rejects.toBeInstanceOf(ForbiddenError);
    const builder = workshop.as("builder");
    await expect(succeedUnit(builder, { unitNumber: number, expectedVersion: 7 })).rejects.toBeInstanceOf(
      ConflictError,
    );
    const inWork = await makeUnit(db, workshop, { state: "sent_back" });
    await expect(succeedUnit(builder, { unitNumber: inWork.number })).rejects.toBeInstanceOf(ForbiddenError);
    expect(await succeedUnit(builder, { unitNumber: number })).toBeGreaterThan(0);
  });

  test("signed after the old one was withdrawn leaves the withdrawal as it is", async () => {
    const { bench, electrician } = await makeSigned();
    const { number: old } = bench.unit;
    const number = await succeedUnit(bench.as("builder"), { unitNumber: old });
    await bringToSignature(bench, number);
    const { version } = await unitNow(electrician, old);
    await withdrawUnit(electrician, {
      unitNumber: old,
      expectedVersion: version,
      reason: "The transformer type was recalled.",
      password: PASSWORD,
      address: ADDRESS,
    });
    await signUnit(electrician, await signInput(electrician, number));
    expect((await unitNow(electrician, old)).state).toBe("withdrawn");
    expect((await unitNow(electrician, number)).state).toBe("signed");
  });

  test("signed at the moment at which the old one is withdrawn: both are told, and the old one is out of force", async () => {
    const { bench, electrician } = await makeSigned();
    const { number: old } = bench.unit;
    const number = await succeedUnit(bench.as("builder"), { unitNumber: old });
    await bringToSignature(bench, number);
    const { version } = await unitNow(electrician, old);
    const input = await signInput(electrician, number);
    const [signed, withdrawn] = await Promise.allSettled([
      signUnit(electrician, input),
      withdrawUnit(electrician, {
        unitNumber: old,
        expectedVersion: version,
        reason: "The transformer type was recalled.",
        password: PASSWORD,
        address: ADDRESS,
      }),
    ]);
    expect(signed.status).toBe("fulfilled");
    const { state } = await unitNow(electrician, old);
    expect(state).toBe(withdrawn.status === "fulfilled" ? "withdrawn" : "superseded");
  });
});
