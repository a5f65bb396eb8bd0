import { and, asc, eq } from "drizzle-orm";
import { beforeEach, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { carryOver, loadChanges } from "~/services/bench/carry-over.server";
import { finishSheet, sendBackFromBench } from "~/services/bench/finish-sheet.server";
import { closeFinding, raiseFinding } from "~/services/bench/raise-finding.server";
import { recordObservation } from "~/services/bench/record-observation.server";
import { takeUnit } from "~/services/bench/bench-turns.server";
import { loadRework } from "~/services/units/load-rework.server";
import { database } from "~/services/database.server";
import {
  ConflictError,
  ForbiddenError,
  GuardError,
  InvalidInputError,
  NotFoundError,
} from "~/services/errors";
import {
  addPhotoRow,
  answerAll,
  examinationCheck,
  goodAnswer,
  lineNow,
  makeBench,
  readingCheck,
  sheetNow,
  type TestBench,
  unitNow,
} from "../fixtures/bench";
import { grantRoles, makeMember, makeWorkshop } from "../fixtures/workshop";

const db = database();
let bench: TestBench;
let number: number;
beforeEach(async () => {
  bench = await makeBench(db);
  number = bench.unit.number;
});

const mailsOf = async () =>
  db
    .select({ recipient: tables.outbox.recipient, text: tables.outbox.text, subject: tables.outbox.subject })
    .from(tables.outbox)
    .where(eq(tables.outbox.workshopId, bench.workshop.id))
    .orderBy(asc(tables.outbox.id));

async function refusedReasons(finishing: Promise<void>): Promise<readonly string[]> {
  const error: unknown = await finishing.then(
    () => null,
    (reason: unknown) => reason,
  );
  if (!(error instanceof GuardError)) throw new Error(`Not refused by a guard: ${String(error)}`);
  return error.reasons;
}

/** Raises a finding on a check. */
function find(checkKey: string, severity: "danger" | "defect" | "advice" = "defect") {
  return raiseFinding(bench.as("inspector"), {
    unitNumber: number,
    severity,
    text: "The strain relief is loose",
    checkKey,
    elementId: null,
  });
}

/** The builder's side of rework: the unit comes back as it is, by hand of the test. */
async function resubmit() {
  await db
    .update(tables.units)
    .set({ state: "submitted" })
    .where(and(eq(tables.units.id, bench.unit.id), eq(tables.units.state, "sent_back")));
  await takeUnit(bench.as("inspector"), { unitNumber: number });
}

test("an untouched sheet is refused with a sentence for every check", async () => {
  const { lines } = await sheetNow(bench.as("inspector"), number);
  expect(lines.length).toBeGreaterThan(5);
  const reasons = await refusedReasons(finishSheet(bench.as("inspector"), { unitNumber: number }));
  for (const { check, photoMissing } of lines) {
    expect(
      reasons.filter((reason) => reason.startsWith(`${check.title}: not done yet`)).length,
    ).toBeGreaterThan(0);
    if (photoMissing) expect(reasons).toContain(`${check.title}: the required photo is missing.`);
  }
  expect((await unitNow(bench.as("inspector"), number)).state).toBe("on_bench");
});

test("one undecided check stops the sheet; measured better, it goes through", async () => {
  const inspector = bench.as("inspector");
  const check = await readingCheck(inspector, number);
  await answerAll(db, bench, [check.key]);
  await addMissingPhoto(check.key);
  const undecided = await recordObservation(inspector, {
    unitNumber: number,
    checkKey: check.key,
    latestId: null,
    // Exactly on the limit: no accuracy decides it.
    answer: { ...goodAnswer(check, bench.instrumentOf), ...{ value: check.limit.value } },
    reason: null,
    note: null,
  });
  const reasons = await refusedReasons(finishSheet(inspector, { unitNumber: number }));
  expect(reasons).toHaveLength(1);
  expect(reasons[0]).toContain(`${check.title}: undecided`);

  await recordObservation(inspector, {
    unitNumber: number,
    checkKey: check.key,
    latestId: undecided,
    answer: goodAnswer(check, bench.instrumentOf),
    reason: "Measured again with the leads nulled",
    note: null,
  });
  await finishSheet(inspector, { unitNumber: number });
  expect((await unitNow(inspector, number)).state).toBe("awaiting_signature");
});

async function addMissingPhoto(key: string) {
  if ((await lineNow(bench.as("inspector"), number, key)).photoMissing) await addPhotoRow(db, bench, key);
}

test("a required photo that was taken back stops the sheet", async () => {
  await answerAll(db, bench);
  const withPhoto = (await sheetNow(bench.as("inspector"), number)).lines.find(
    ({ check, photos }) => check.photo === "required" && photos.length > 0,
  );
  if (!withPhoto) throw new Error("No check of this sheet requires a photo.");
  await db
    .update(tables.files)
    .set({ removedAt: bench.clock.at })
    .where(and(eq(tables.files.unitId, bench.unit.id), eq(tables.files.checkKey, withPhoto.check.key)));
  const reasons = await refusedReasons(finishSheet(bench.as("inspector"), { unitNumber: number }));
  expect(reasons).toEqual([`${withPhoto.check.title}: the required photo is missing.`]);
});

test("a finished sheet tells the builder and the electricians who may sign, and nobody else", async () => {
  await grantRoles(db, bench.workshop.id, bench.people.inspector.id, ["electrician"]);
  await grantRoles(db, bench.workshop.id, bench.people.builder.id, ["electrician"]);
  const second = await makeMember(db, bench, ["electrician"]);
  await answerAll(db, bench);
  await finishSheet(bench.as("inspector"), { unitNumber: number });
  const mails = await mailsOf();
  expect(mails.map(({ recipient }) => recipient).sort()).toEqual(
    [bench.people.electrician.email, second.email, bench.people.builder.email].sort(),
  );
  const [turn] = await db.select().from(tables.benchTurns).where(eq(tables.benchTurns.unitId, bench.unit.id));
  expect(turn?.endedAt).not.toBeNull();
});

test("a failed check doesn't stop the sheet, so that an electrician can refuse on it", async () => {
  const check = await examinationCheck(bench.as("inspector"), number);
  await answerAll(db, bench, [check.key]);
  await recordObservation(bench.as("inspector"), {
    unitNumber: number,
    checkKey: check.key,
    latestId: null,
    answer: { kind: "examined", conforms: false },
    reason: null,
    note: null,
  });
  await addMissingPhoto(check.key);
  await finishSheet(bench.as("inspector"), { unitNumber: number });
  expect((await unitNow(bench.as("inspector"), number)).state).toBe("awaiting_signature");
  expect((await mailsOf())[0]?.text).toContain("1 check failed");
});

test("a stale form, another inspector and another workshop finish nothing", async () => {
  await answerAll(db, bench);
  const { version } = await unitNow(bench.as("inspector"), number);
  const stale = finishSheet(bench.as("inspector"), { unitNumber: number, expectedVersion: version - 1 });
  await expect(stale).rejects.toThrow(ConflictError);
  const other = bench.asPerson(await makeMember(db, bench, ["inspector"]), ["inspector"]);
  await expect(finishSheet(other, { unitNumber: number })).rejects.toThrow(ForbiddenError);
  const elsewhere = (await makeWorkshop(db)).as("inspector");
  await expect(finishSheet(elsewhere, { unitNumber: number })).rejects.toThrow(NotFoundError);
  expect(await unitNow(bench.as("inspector"), number)).toMatchObject({ state: "on_bench", version });
});

test("finishing twice at once happens once", async () => {
  await answerAll(db, bench);
  const twice = await Promise.allSettled([
    finishSheet(bench.as("inspector"), { unitNumber: number }),
    finishSheet(bench.as("inspector"), { unitNumber: number }),
  ]);
  expect(twice.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
  expect(await mailsOf()).toHaveLength(2);
});

test("findings count up within the unit, also when raised at the same moment", async () => {
  const check = await examinationCheck(bench.as("inspector"), number);
  await Promise.all([find(check.key), find(check.key), find(check.key)]);
  const { findings } = await lineNow(bench.as("inspector"), number, check.key);
  expect(findings.map((finding) => finding.number)).toEqual([1, 2, 3]);
});

test("a finding hangs on a check or an element of this map", async () => {
  const raise = (checkKey: string | null, elementId: string | null) =>
    raiseFinding(bench.as("inspector"), {
      unitNumber: number,
      severity: "advice",
      text: "Worth knowing",
      checkKey,
      elementId,
    });
  await expect(raise(null, null)).rejects.toThrow(InvalidInputError);
  await expect(raise(null, "NO-SUCH")).rejects.toThrow(InvalidInputError);
  await expect(raise("no-such-check", null)).rejects.toThrow(NotFoundError);
  const { map } = (await sheetNow(bench.as("inspector"), number)).revision;
  await expect(raise(null, map.elements[0]?.id ?? "")).resolves.toMatchObject({ number: 1 });
});

test("only the inspector who has the unit closes a finding, once, with words", async () => {
  const inspector = bench.as("inspector");
  const check = await examinationCheck(inspector, number);
  const { id } = await find(check.key, "danger");
  const close = (text: string, as = inspector) =>
    closeFinding(as, { unitNumber: number, findingId: id, text });
  await expect(close("Seen", bench.as("builder"))).rejects.toThrow(ForbiddenError);
  await expect(close("Seen", bench.as("electrician"))).rejects.toThrow(ForbiddenError);
  await expect(close("   ")).rejects.toMatchObject({ field: "text" });
  await close("Tightened, pulled at it with 60 N");
  await expect(close("Once more")).rejects.toThrow(ConflictError);
  const [finding] = (await lineNow(inspector, number, check.key)).findings;
  expect(finding?.closing).toMatchObject({
    by: bench.people.inspector.name,
    text: "Tightened, pulled at it with 60 N",
  });
});

test("sending back needs a reason and an open finding, and opens the next revision", async () => {
  const inspector = bench.as("inspector");
  const bare = await refusedReasons(sendBackFromBench(inspector, { unitNumber: number, reason: "  " }));
  expect(bare).toHaveLength(2);
  const check = await examinationCheck(inspector, number);
  const { id } = await find(check.key);
  await closeFinding(inspector, { unitNumber: number, findingId: id, text: "Seen to" });
  const closed = await refusedReasons(sendBackFromBench(inspector, { unitNumber: number, reason: "Loose" }));
  expect(closed).toHaveLength(1);
  await find(check.key);
  await sendBackFromBench(inspector, { unitNumber: number, reason: "The cord can be pulled out" });
  expect(await unitNow(inspector, number)).toMatchObject({ state: "sent_back", revision: 2 });
  const mails = await mailsOf();
  expect(mails.map(({ recipient }) => recipient)).toEqual([bench.people.builder.email]);
  expect(mails[0]?.text).toContain("The cord can be pulled out");
  // It stays with the revision that it opened, for its builder and the next inspector; the trail holds no free text.
  const sentBack = { reason: "The cord can be pulled out", by: inspector.person.name };
  expect((await loadRework(bench.as("builder"), await unitNow(inspector, number))).sentBack).toEqual(
    sentBack,
  );
  expect((await sheetNow(inspector, number)).revision.sentBack).toEqual(sentBack);
  const entries = await db
    .select()
    .from(tables.auditEntries)
    .where(eq(tables.auditEntries.unitId, bench.unit.id));
  expect(JSON.stringify(entries.map(({ detail }) => detail))).not.toContain("pulled out");
  await expect(find(check.key)).rejects.toThrow(ForbiddenError);
});

test("after rework an untouched check is carried over by hand, with a pointer; a failed or found-on one is not", async () => {
  const inspector = bench.as("inspector");
  const failed = await examinationCheck(inspector, number);
  const read = await readingCheck(inspector, number);
  await answerAll(db, bench, [failed.key]);
  await recordObservation(inspector, {
    unitNumber: number,
    checkKey: failed.key,
    latestId: null,
    answer: { kind: "examined", conforms: false },
    reason: null,
    note: null,
  });
  await find(failed.key);
  const before = await lineNow(inspector, number, read.key);
  await sendBackFromBench(inspector, { unitNumber: number, reason: "See the finding" });
  await resubmit();

  // Nothing is carried by itself.
  expect((await sheetNow(inspector, number)).progress.decided).toBe(0);
  const changes = await loadChanges(inspector, await unitNow(inspector, number));
  const choiceOf = (key: string) => changes?.lines.find(({ check }) => check.key === key)?.choice;
  expect(changes?.mapChanges).toEqual([]);
  expect(choiceOf(read.key)).toEqual({ kind: "may-carry" });
  expect(choiceOf(failed.key)).toMatchObject({ kind: "do-again" });

  const { version } = await unitNow(inspector, number);
  const refused = carryOver(inspector, { unitNumber: number, checkKeys: [read.key, failed.key] });
  await expect(refused).rejects.toThrow(InvalidInputError);
  // One refused key refuses the whole act.
  expect(await unitNow(inspector, number)).toMatchObject({ version });
  expect((await lineNow(inspector, number, read.key)).observation).toBeNull();

  bench.clock.at = new Date("2026-05-20T08:00:00Z");
  expect(
    await carryOver(inspector, { unitNumber: number, checkKeys: [read.key], expectedVersion: version }),
  ).toBe(1);
  const line = await lineNow(inspector, number, read.key);
  expect(line.verdict).toBe(before.verdict);
  expect(line.photoMissing).toBe(false);
  expect(line.observation).toMatchObject({
    value: before.observation?.value,
    at: before.observation?.at,
    revision: 1,
    carried: { fromId: before.observation?.id, by: inspector.person.name, at: bench.clock.at },
  });
  const again = carryOver(inspector, { unitNumber: number, checkKeys: [read.key] });
  await expect(again).rejects.toThrow("answered on this revision already");
});

test("changed facts of the unit leave nothing to carry over", async () => {
  const inspector = bench.as("inspector");
  const check = await examinationCheck(inspector, number);
  await answerAll(db, bench);
  await find(check.key, "advice");
  await sendBackFromBench(inspector, { unitNumber: number, reason: "See the finding" });
  const [first] = await db
    .select()
    .from(tables.revisions)
    .where(and(eq(tables.revisions.unitId, bench.unit.id), eq(tables.revisions.number, 1)));
  const { revision } = await sheetNow(inspector, number);
  // Submission freezes the facts; this unit's row says 230 V from now on, its first revision was examined at 120 V.
  await db
    .update(tables.revisions)
    .set({ facts: { ...revision.facts, supplyVolts: 120 } })
    .where(eq(tables.revisions.id, first?.id ?? 0));
  await resubmit();
  const changes = await loadChanges(inspector, await unitNow(inspector, number));
  expect(changes?.otherChanges).toEqual(["The unit's facts changed: supply volts was 120, is 230."]);
  expect(changes?.lines.filter(({ choice }) => choice.kind === "may-carry")).toEqual([]);
});

test("a first revision has nothing to compare with", async () => {
  const inspector = bench.as("inspector");
  expect(await loadChanges(inspector, await unitNow(inspector, number))).toBeNull();
  await expect(carryOver(inspector, { unitNumber: number, checkKeys: ["anything"] })).rejects.toThrow(
    ConflictError,
  );
});
