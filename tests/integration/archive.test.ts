import { eq } from "drizzle-orm";
import { beforeAll, describe, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { findRecord } from "~/services/archive/find-record.server";
import { findPublicRecord } from "~/services/archive/public-record.server";
import {
  listArchivePeople,
  type RecordSearch,
  recordStates,
  searchRecords,
} from "~/services/archive/search-records.server";
import { withdrawUnit } from "~/services/archive/withdraw-unit.server";
import { readUnitTrail } from "~/services/audit/read-trail.server";
import { verifyTrail } from "~/services/audit/verify-trail.server";
import { database } from "~/services/database.server";
import { AuthenticationError, ConflictError, GuardError, NotFoundError } from "~/services/errors";
import { refuseUnit, signUnit } from "~/services/signing/decide-on-unit.server";
import { type UnitState, validity } from "~/workflow/states";
import { type TestBench, unitNow } from "../fixtures/bench";
import { ADDRESS, givePassword, makeReviewable, PASSWORD, signInput } from "../fixtures/signing";
import {
  makeLicence,
  makeMember,
  makePerson,
  makeUnit,
  makeWorkshop,
  type TestWorkshop,
} from "../fixtures/workshop";
import { ownerQuery, ownerUrlOfThisFile } from "../helpers/database";

const db = database();

async function sign(bench: TestBench, recheckOn = "2027-05-04") {
  const electrician = bench.as("electrician");
  return signUnit(electrician, await signInput(electrician, bench.unit.number, { recheckOn }));
}

async function withdrawal(bench: TestBench, changes: { reason?: string; password?: string } = {}) {
  const electrician = bench.as("electrician");
  const { version } = await unitNow(electrician, bench.unit.number);
  return {
    unitNumber: bench.unit.number,
    expectedVersion: version,
    reason: "A batch of the switch used in it was recalled.",
    password: PASSWORD,
    address: ADDRESS,
    ...changes,
  };
}

describe("withdrawing", () => {
  test("needs a reason and the password, and leaves the record as it was", async () => {
    const bench = await makeReviewable(db);
    const { publicCode, sha256 } = await sign(bench);
    const electrician = bench.as("electrician");
    await expect(
      withdrawUnit(electrician, await withdrawal(bench, { password: "wrong one" })),
    ).rejects.toBeInstanceOf(AuthenticationError);
    await expect(withdrawUnit(electrician, await withdrawal(bench, { reason: " " }))).rejects.toBeInstanceOf(
      GuardError,
    );
    const input = await withdrawal(bench);
    // A double click: done once, and no error for the second.
    await Promise.all([withdrawUnit(electrician, input), withdrawUnit(electrician, input)]);
    const other = await makeMember(db, bench, ["electrician"]);
    await givePassword(db, [other.id]);
    await expect(withdrawUnit(bench.asPerson(other, ["electrician"]), input)).rejects.toBeInstanceOf(
      ConflictError,
    );

    const unit = await unitNow(electrician, bench.unit.number);
    expect(unit.state).toBe("withdrawn");
    const stored = await findRecord(electrician, unit);
    expect(stored).toMatchObject({
      sha256,
      intact: true,
      validity: { kind: "must-not-be-used", because: "withdrawn" },
      withdrawal: { by: bench.people.electrician.name, reason: input.reason },
    });
    expect(await findPublicRecord(db, publicCode, bench.clock.at)).toMatchObject({
      validity: { kind: "must-not-be-used", because: "withdrawn" },
      conditions: null,
      withdrawnOn: "2026-05-04",
    });
    const mails = await db
      .select()
      .from(tables.outbox)
      .where(eq(tables.outbox.subject, `Unit ${unit.number} was withdrawn: ${unit.name}`));
    expect(mails).toHaveLength(2);
    expect(mails[0]?.text).toContain(input.reason);
  });
});

describe("the public page", () => {
  test("tells state and conditions, and nothing about any person", async () => {
    const bench = await makeReviewable(db);
    const { publicCode } = await sign(bench);
    const shown = await findPublicRecord(db, publicCode, bench.clock.at);
    expect(Object.keys(shown ?? {}).sort()).toEqual(
      [
        "cautions",
        "conditions",
        "decidedOn",
        "demo",
        "departures",
        "state",
        "unitName",
        "unitNumber",
        "validity",
        "withdrawnOn",
        "workshopName",
      ].sort(),
    );
    expect(shown).toMatchObject({
      state: "signed",
      validity: { kind: "may-be-used", recheckOn: "2027-05-04" },
      conditions: { place: "Indoors", supply: "230 V" },
      decidedOn: "2026-05-04",
      withdrawnOn: null,
    });
    const text = JSON.stringify(shown);
    for (const person of Object.values(bench.people)) {
      expect(text).not.toContain(person.name);
      expect(text).not.toContain(person.email);
    }
  });

  test("follows the calendar of the workshop, and knows no other code", async () => {
    const bench = await makeReviewable(db);
    const { publicCode } = await sign(bench, "2026-06-30");
    const shownAt = (moment: string) => findPublicRecord(db, publicCode, new Date(moment));
    const kindAt = async (moment: string) => (await shownAt(moment))?.validity.kind;
    expect(await kindAt("2026-05-30T12:00:00Z")).toBe("may-be-used");
    expect(await kindAt("2026-05-31T12:00:00Z")).toBe("recheck-due");
    expect(await kindAt("2026-06-30T21:59:59Z")).toBe("recheck-due");
    // Midnight in Berlin.
    expect(await kindAt("2026-06-30T22:00:00Z")).toBe("lapsed");
    // What must not be used has no conditions under which it may.
    expect((await shownAt("2026-06-30T21:59:59Z"))?.conditions).toMatchObject({ place: "Indoors" });
    expect((await shownAt("2026-06-30T22:00:00Z"))?.conditions).toBeNull();
    for (const code of [publicCode.slice(1), `${publicCode.slice(0, -1)}%`, "", "' or 1=1 --"]) {
      expect(await findPublicRecord(db, code, bench.clock.at)).toBeNull();
    }
  });
});

/** Puts a decided unit straight into the tables: searching asks for many. */
async function archived(
  workshop: TestWorkshop,
  options: {
    name: string;
    state: Extract<UnitState, "signed" | "refused" | "withdrawn">;
    recheckOn?: string;
    decidedAt: string;
    builderId?: number;
  },
): Promise<number> {
  const { name, state, builderId = workshop.people.builder.id } = options;
  const unit = await makeUnit(db, workshop, { name, state, builderId });
  const licenceId = await makeLicence(db, workshop);
  const signed = state !== "refused";
  const [decision] = await db
    .insert(tables.decisions)
    .values({
      unitId: unit.id,
      revisionId: unit.revisionId,
      kind: signed ? "signed" : "refused",
      signerId: workshop.people.electrician.id,
      licenceId,
      statement: "For a test.",
      conditions: signed ? { place: "", supply: "", load: "", supervision: "", other: "" } : null,
      recheckOn: signed ? (options.recheckOn ?? "2027-05-04") : null,
      signatureMethod: "typed",
      typedName: "Test electrician",
      decidedAt: new Date(options.decidedAt),
    })
    .$returningId();
  if (!decision) throw new Error("The decision got no id.");
  await db.insert(tables.records).values({
    workshopId: workshop.workshop.id,
    unitId: unit.id,
    decisionId: decision.id,
    publicCode: `code${decision.id}`.padEnd(24, "x"),
    canonicalJson: "{}",
    sha256: String(decision.id).padStart(8, "a").padEnd(64, "0"),
    madeAt: new Date(options.decidedAt),
  });
  return unit.number;
}

describe("searching the archive", () => {
  let workshop: TestWorkshop;
  let everything: RecordSearch;
  let otherBuilder: number;

  beforeAll(async () => {
    workshop = await makeWorkshop(db);
    otherBuilder = (await makePerson(db, { name: "Quirina Quill" })).id;
    // Today is 4 May 2026: the borders of "recheck due" (30 days) and "lapsed" on both sides.
    const signed = (name: string, recheckOn: string) =>
      archived(workshop, { name, state: "signed", recheckOn, decidedAt: "2026-04-10T10:00:00Z" });
    await signed("Lapsed yesterday", "2026-05-03");
    await signed("Due today", "2026-05-04");
    await signed("Due in thirty days", "2026-06-03");
    await signed("In force", "2026-06-04");
    await archived(workshop, { name: "Refused lamp", state: "refused", decidedAt: "2026-04-30T22:30:00Z" });
    await archived(workshop, {
      name: "Withdrawn 100% amplifier",
      state: "withdrawn",
      decidedAt: "2026-04-30T21:30:00Z",
      builderId: otherBuilder,
    });
    for (let index = 0; index < 30; index++) {
      const name = `Bulk ${String(index).padStart(2, "0")}`;
      await archived(workshop, { name, state: "signed", decidedAt: "2026-03-01T10:00:00Z" });
    }
    await makeUnit(db, workshop, { name: "Still on the bench", state: "on_bench" });
    const foreign = await makeWorkshop(db);
    await archived(foreign, { name: "Foreign lamp", state: "signed", decidedAt: "2026-04-10T10:00:00Z" });
    everything = {
      text: "",
      state: null,
      builderId: null,
      signerId: null,
      from: null,
      to: null,
      sort: { by: "decided", direction: "desc" },
      page: 1,
      pageSize: 100,
    };
  });

  const names = async (changes: Partial<RecordSearch>) =>
    (await searchRecords(workshop.as("archivist"), { ...everything, ...changes })).rows.map(
      (row) => row.unitName,
    );

  test("finds what was decided in this workshop, and nothing else", async () => {
    const { rows, total } = await searchRecords(workshop.as("archivist"), everything);
    expect(total).toBe(36);
    expect(rows).toHaveLength(36);
    expect(rows.map((row) => row.unitName)).not.toContain("Foreign lamp");
    const last = await searchRecords(workshop.as("archivist"), { ...everything, page: 4, pageSize: 10 });
    expect(last).toMatchObject({ total: 36, page: 4 });
    expect(last.rows).toHaveLength(6);
    expect(await searchRecords(workshop.as("archivist"), { ...everything, page: 99, pageSize: 10 })).toEqual(
      last,
    );
  });

  test("each state of the filter is the one that validity() computes", async () => {
    for (const state of recordStates) {
      const { rows } = await searchRecords(workshop.as("archivist"), { ...everything, state });
      const all = await searchRecords(workshop.as("archivist"), everything);
      const expected = all.rows.filter((row) => {
        const now = validity(row.state, row.recheckOn, "2026-05-04").kind;
        return state === row.state || state === now;
      });
      expect(rows.map((row) => row.unitName).sort(), state).toEqual(
        expected.map((row) => row.unitName).sort(),
      );
    }
    expect(await names({ state: "recheck-due" })).toEqual(["Due in thirty days", "Due today"]);
    expect(await names({ state: "lapsed" })).toEqual(["Lapsed yesterday"]);
    expect(await names({ state: "superseded" })).toEqual([]);
  });

  test("by text takes signs literally, and finds people, numbers and hashes", async () => {
    expect(await names({ text: "100%" })).toEqual(["Withdrawn 100% amplifier"]);
    expect(await names({ text: "%" })).toEqual(["Withdrawn 100% amplifier"]);
    expect(await names({ text: "_" })).toEqual([]);
    expect(await names({ text: "quirina" })).toEqual(["Withdrawn 100% amplifier"]);
    expect(await names({ text: "REFUSED lamp" })).toEqual(["Refused lamp"]);
    const [refused] = (await searchRecords(workshop.as("archivist"), { ...everything, state: "refused" }))
      .rows;
    expect(await names({ text: String(refused?.unitNumber) })).toContain("Refused lamp");
    const [record] = await db
      .select({ sha256: tables.records.sha256 })
      .from(tables.records)
      .where(eq(tables.records.publicCode, refused?.publicCode ?? ""));
    expect(await names({ text: record?.sha256.slice(0, 12) })).toEqual(["Refused lamp"]);
  });

  test("by day counts in the workshop's calendar, both days included", async () => {
    // 22:30 UTC on 30 April is 1 May in Berlin.
    expect(await names({ from: "2026-05-01" })).toEqual(["Refused lamp"]);
    expect(await names({ from: "2026-04-30", to: "2026-04-30" })).toEqual(["Withdrawn 100% amplifier"]);
    expect(await names({ to: "2026-02-28" })).toEqual([]);
  });

  test("by builder and signer", async () => {
    expect(await names({ builderId: otherBuilder })).toEqual(["Withdrawn 100% amplifier"]);
    expect(await names({ signerId: workshop.people.electrician.id })).toHaveLength(36);
    expect(await names({ signerId: otherBuilder })).toEqual([]);
    const people = await listArchivePeople(workshop.as("archivist"));
    expect(people.builders.map(({ name }) => name)).toEqual(["Quirina Quill", "Test builder"]);
    expect(people.signers.map(({ name }) => name)).toEqual(["Test electrician"]);
  });

  test("goes page by page without losing or repeating a row, in every order", async () => {
    for (const by of ["decided", "number", "name", "recheck"] as const) {
      for (const direction of ["asc", "desc"] as const) {
        const seen: string[] = [];
        for (const page of [1, 2, 3, 4]) {
          seen.push(...(await names({ sort: { by, direction }, page, pageSize: 10 })));
        }
        expect(seen, `${by} ${direction}`).toHaveLength(36);
        expect(new Set(seen).size, `${by} ${direction}`).toBe(36);
        if (by === "name") {
          const ordered = [...seen].sort((a, b) => a.localeCompare(b, "en"));
          expect(seen).toEqual(direction === "asc" ? ordered : ordered.reverse());
        }
      }
    }
  });

  test("a unit that was never decided on has no record", async () => {
    const unit = await makeUnit(db, workshop, { state: "on_bench" });
    const archivist = workshop.as("archivist");
    await expect(findRecord(archivist, await unitNow(archivist, unit.number))).rejects.toBeInstanceOf(
      NotFoundError,
    );
  });
});

describe("the trail", () => {
  test("tells who took the unit from which state to which, each entry chained to the one before", async () => {
    const bench = await makeReviewable(db);
    await sign(bench);
    await withdrawUnit(bench.as("electrician"), await withdrawal(bench));
    const archivist = bench.as("archivist");
    const trail = await readUnitTrail(archivist, await unitNow(archivist, bench.unit.number));
    const moves = trail.filter((entry) => entry.toState !== null);
    expect(moves.map(({ actor, fromState, toState }) => [actor, fromState, toState])).toEqual([
      [bench.people.inspector.name, "on_bench", "awaiting_signature"],
      [bench.people.electrician.name, "awaiting_signature", "signed"],
      [bench.people.electrician.name, "signed", "withdrawn"],
    ]);
    for (const [index, entry] of trail.entries()) {
      const before = trail[index - 1];
      // All entries of this workshop are about the one unit, so they follow one another.
      if (before) expect(entry.previousHash).toBe(before.hash);
    }
    const verdict = await verifyTrail(db, bench.workshop.id);
    expect(verdict).toEqual({ sound: true, entries: trail.length, headHash: trail.at(-1)?.hash });
  });

  test("a change, a gap, a cut end and a forged link are each found, and where", async () => {
    const owner = ownerUrlOfThisFile();
    const bench = await makeReviewable(db);
    await sign(bench);
    const id = bench.workshop.id;
    const sound = await verifyTrail(db, id);
    expect(sound.sound).toBe(true);
    const count = sound.entries;
    const at = Math.floor(count / 2);

    await ownerQuery(
      owner,
      "create table kept_entries as select * from audit_entries where workshop_id = ?",
      [id],
    );
    const restore = async () => {
      await ownerQuery(owner, "delete from audit_entries where workshop_id = ?", [id]);
      await ownerQuery(owner, "insert into audit_entries select * from kept_entries");
      expect((await verifyTrail(db, id)).sound).toBe(true);
    };
    const tamper = (sql: string) => ownerQuery(owner, sql, [id, at]);

    await tamper("update audit_entries set actor_id = null where workshop_id = ? and sequence = ?");
    expect(await verifyTrail(db, id)).toMatchObject({ sound: false, brokenAt: at });
    await restore();
    await tamper(
      "update audit_entries set detail = '{\"revision\":9}' where workshop_id = ? and sequence = ?",
    );
    expect(await verifyTrail(db, id)).toMatchObject({ sound: false, brokenAt: at });
    await restore();
    await tamper("delete from audit_entries where workshop_id = ? and sequence = ?");
    expect(await verifyTrail(db, id)).toMatchObject({
      sound: false,
      brokenAt: at,
      why: `Entry ${at} is missing.`,
    });
    await restore();
    await tamper(
      "update audit_entries set previous_hash = repeat('0', 64) where workshop_id = ? and sequence = ?",
    );
    expect(await verifyTrail(db, id)).toMatchObject({ sound: false, brokenAt: at });
    await restore();
    await ownerQuery(owner, "delete from audit_entries where workshop_id = ? and sequence = ?", [id, count]);
    expect(await verifyTrail(db, id)).toMatchObject({ sound: false, brokenAt: count });
    await restore();
    await ownerQuery(owner, "drop table kept_entries");
  });

  test("the application itself can neither change nor delete an entry", async () => {
    const bench = await makeReviewable(db);
    await expect(
      db
        .update(tables.auditEntries)
        .set({ act: "nothing" })
        .where(eq(tables.auditEntries.unitId, bench.unit.id)),
    ).rejects.toThrow();
    await expect(
      db.delete(tables.auditEntries).where(eq(tables.auditEntries.unitId, bench.unit.id)),
    ).rejects.toThrow();
  });
});

test("a refused unit is in the archive with its reasons and may never be used", async () => {
  const bench = await makeReviewable(db);
  const electrician = bench.as("electrician");
  const input = await signInput(electrician, bench.unit.number, { statement: "Its case is of tin foil." });
  const { publicCode } = await refuseUnit(electrician, input);
  const { record, validity: now } = await findRecord(
    electrician,
    await unitNow(electrician, bench.unit.number),
  );
  expect(record.decision.statement).toBe("Its case is of tin foil.");
  expect(now).toEqual({ kind: "must-not-be-used", because: "refused" });
  const shown = await findPublicRecord(db, publicCode, bench.clock.at);
  expect(shown).toMatchObject({ state: "refused", conditions: null });
  expect(JSON.stringify(shown)).not.toContain("tin foil");
});
