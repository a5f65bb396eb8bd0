import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { and, eq } from "drizzle-orm";
import sharp from "sharp";
import { afterAll, describe, expect, test } from "vitest";
import { openDatabase, tables } from "~/db/client.server";
import { findRecord } from "~/services/archive/find-record.server";
import { loadSheet } from "~/services/bench/load-sheet.server";
import type { ServiceContext } from "~/services/context.server";
import { database } from "~/services/database.server";
import {
  AuthenticationError,
  ConflictError,
  ForbiddenError,
  GuardError,
  ThrottledError,
} from "~/services/errors";
import { parseRecord } from "~/services/records/canonical-record";
import { refuseUnit, signUnit } from "~/services/signing/decide-on-unit.server";
import { sendBackFromReview } from "~/services/signing/send-back.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { sheetNow, starterMap, type TestBench, unitNow } from "../fixtures/bench";
import { drawnSignature, givePassword, makeReviewable, signInput } from "../fixtures/signing";
import { grantRoles, makeLicence, makeMember } from "../fixtures/workshop";
import { ownerUrlOfThisFile } from "../helpers/database";

const db = database();
// The application itself can't change an observation.
const owner = openDatabase(ownerUrlOfThisFile(), { connections: 2 });
afterAll(() => owner.close());

async function decisionsOf({ unit }: TestBench) {
  return db.select().from(tables.decisions).where(eq(tables.decisions.unitId, unit.id));
}

async function recordOf({ unit }: TestBench) {
  const [record] = await db.select().from(tables.records).where(eq(tables.records.unitId, unit.id));
  if (!record) throw new Error("There is no record.");
  return record;
}

/** Tries to sign and gives the reasons why not. */
async function reasonsAgainst(bench: TestBench, context = bench.as("electrician")): Promise<string> {
  const input = await signInput(context, bench.unit.number);
  const error: unknown = await signUnit(context, input).catch((thrown: unknown) => thrown);
  expect(error).toBeInstanceOf(GuardError);
  expect(await decisionsOf(bench)).toEqual([]);
  expect((await unitNow(context, bench.unit.number)).state).toBe("awaiting_signature");
  return error instanceof GuardError ? error.reasons.join("\n") : "";
}

describe("signing", () => {
  test("writes decision, record, PDF job, mails and trail entry in one go", async () => {
    const bench = await makeReviewable(db);
    const electrician = bench.as("electrician");
    const png = await drawnSignature();
    const made = await signUnit(
      electrician,
      await signInput(electrician, bench.unit.number, { signature: { method: "drawn", png } }),
    );

    expect((await unitNow(electrician, bench.unit.number)).state).toBe("signed");
    const [decision, ...more] = await decisionsOf(bench);
    expect(more).toEqual([]);
    expect(decision).toMatchObject({ kind: "signed", signatureMethod: "drawn", recheckOn: "2027-05-04" });
    const image = await sharp(decision?.signatureImage ?? Buffer.alloc(0)).metadata();
    expect(image.format).toBe("png");

    const stored = await recordOf(bench);
    expect(stored).toMatchObject({ publicCode: made.publicCode, sha256: made.sha256, pdfKey: null });
    const record = parseRecord(stored.canonicalJson);
    expect(record.decision.signer.name).toBe(bench.people.electrician.name);
    expect(record.checks.length).toBe((await sheetNow(electrician, bench.unit.number)).lines.length);
    expect(record.checks.every((check) => check.verdict === "pass")).toBe(true);
    expect(record.files.length).toBeGreaterThan(0);

    const jobs = await db.select().from(tables.jobs).where(eq(tables.jobs.subjectId, stored.id));
    expect(jobs).toMatchObject([{ kind: "make-record-pdf", doneAt: null }]);
    const mails = await db
      .select()
      .from(tables.outbox)
      .where(eq(tables.outbox.subject, `Unit ${bench.unit.number} was signed: Unit ${bench.unit.number}`));
    expect(mails.map((mail) => mail.recipient).sort()).toEqual(
      [bench.people.builder.email, bench.people.inspector.email].sort(),
    );
    const [entry] = await db
      .select()
      .from(tables.auditEntries)
      .where(and(eq(tables.auditEntries.unitId, bench.unit.id), eq(tables.auditEntries.act, "unit.sign")));
    expect(entry).toMatchObject({
      actorId: bench.people.electrician.id,
      fromState: "awaiting_signature",
      toState: "signed",
      detail: { recordSha256: made.sha256 },
    });
  });

  test("gives the record the hash that sha256sum computes of the same bytes", async () => {
    const bench = await makeReviewable(db);
    const electrician = bench.as("electrician");
    const { sha256 } = await signUnit(electrician, await signInput(electrician, bench.unit.number));
    const folder = mkdtempSync(join(tmpdir(), "record-"));
    try {
      const file = join(folder, "record.json");
      writeFileSync(file, (await recordOf(bench)).canonicalJson);
      expect(execFileSync("sha256sum", [file]).toString().slice(0, 64)).toBe(sha256);
    } finally {
      rmSync(folder, { recursive: true });
    }
  });

  test("a double click makes one decision, and both clicks get it", async () => {
    const bench = await makeReviewable(db);
    const electrician = bench.as("electrician");
    const input = await signInput(electrician, bench.unit.number);
    const [one, two] = await Promise.all([signUnit(electrician, input), signUnit(electrician, input)]);
    expect(one.publicCode).toBe(two.publicCode);
    expect([one.before, two.before].sort()).toEqual([false, true]);
    expect(await decisionsOf(bench)).toHaveLength(1);
    // Long afterwards too, as from a page that was left open.
    expect(await signUnit(electrician, input)).toEqual({ ...one, before: true });
    // But a third party's form of the same version is told that somebody acted first.
    const other = await makeMember(db, bench, ["electrician"]);
    await givePassword(db, [other.id]);
    await makeLicence(db, bench, { personId: other.id });
    const context = bench.asPerson(other, ["electrician"]);
    await expect(
      signUnit(context, { ...input, signature: { method: "typed", typedName: other.name } }),
    ).rejects.toBeInstanceOf(ConflictError);
  });

  test("of two electricians at once one signs and the other learns who was first", async () => {
    const bench = await makeReviewable(db);
    const other = await makeMember(db, bench, ["electrician"], { name: "Olga Other" });
    await givePassword(db, [other.id]);
    await makeLicence(db, bench, { personId: other.id });
    const contexts = [bench.as("electrician"), bench.asPerson(other, ["electrician"])];
    const outcomes = await Promise.allSettled(
      contexts.map(async (context) => signUnit(context, await signInput(context, bench.unit.number))),
    );
    const failures = outcomes.filter((outcome) => outcome.status === "rejected");
    expect(failures).toHaveLength(1);
    expect(failures[0]?.reason).toBeInstanceOf(ConflictError);
    const [decision, ...more] = await decisionsOf(bench);
    expect(more).toEqual([]);
    const winner = decision?.signerId === other.id ? "Olga Other" : bench.people.electrician.name;
    expect(String(failures[0]?.reason)).toContain(winner);
  });
});

describe("a guard stops the signature, in words:", () => {
  test("no licence", async () => {
    expect(await reasonsAgainst(await makeReviewable(db, { licence: null }))).toContain("no licence on file");
  });

  test("a licence that lapsed yesterday, by the workshop's calendar", async () => {
    const bench = await makeReviewable(db, { licence: { validTo: "2026-05-05" } });
    // In Berlin it is half past midnight on 6 May, in UTC still the 5th.
    bench.clock.at = new Date("2026-05-05T22:30:00Z");
    expect(await reasonsAgainst(bench)).toContain("lapsed: its last day was 5 May 2026");
    bench.clock.at = new Date("2026-05-05T21:30:00Z");
    const electrician = bench.as("electrician");
    await signUnit(electrician, await signInput(electrician, bench.unit.number));
  });

  test("a revoked licence", async () => {
    const bench = await makeReviewable(db, { licence: { revokedAt: new Date("2026-05-01T00:00:00Z") } });
    expect(await reasonsAgainst(bench)).toContain("has been revoked");
  });

  test("a licence for lower voltages", async () => {
    const bench = await makeReviewable(db, { licence: { maxSupplyVolts: 120 } });
    expect(await reasonsAgainst(bench)).toContain("covers supplies up to 120 V; this unit is for 230 V");
  });

  test("a licence without batteries", async () => {
    const bench = await makeReviewable(db, {
      map: starterMap("battery-backup-box"),
      licence: { coversBatteries: false },
    });
    expect(await reasonsAgainst(bench)).toContain("does not cover battery equipment");
  });

  test("a licence of another person or workshop doesn't help", async () => {
    const bench = await makeReviewable(db, { licence: null });
    const elsewhere = await makeReviewable(db, { licence: null });
    await makeLicence(db, elsewhere, { personId: bench.people.electrician.id });
    await makeLicence(db, bench, { personId: bench.people.steward.id });
    expect(await reasonsAgainst(bench)).toContain("no licence on file");
  });

  test("an open finding of danger", async () => {
    const bench = await makeReviewable(db);
    await db.insert(tables.findings).values({
      unitId: bench.unit.id,
      revisionId: bench.unit.revisionId,
      number: 1,
      severity: "danger",
      text: "The lid is live.",
      raisedById: bench.people.inspector.id,
      raisedAt: bench.clock.at,
    });
    expect(await reasonsAgainst(bench)).toContain(
      "Finding 1 tells of a danger and is open: “The lid is live.”",
    );
    await db
      .update(tables.findings)
      .set({ closedAt: bench.clock.at, closedById: bench.people.inspector.id, closingText: "Earthed." })
      .where(eq(tables.findings.unitId, bench.unit.id));
    const electrician = bench.as("electrician");
    await signUnit(electrician, await signInput(electrician, bench.unit.number));
  });

  test("a check that nobody decided", async () => {
    const bench = await makeReviewable(db);
    const [first] = (await sheetNow(bench.as("inspector"), bench.unit.number)).lines;
    await owner
      .delete(tables.observations)
      .where(
        and(
          eq(tables.observations.unitId, bench.unit.id),
          eq(tables.observations.checkKey, first?.check.key ?? ""),
        ),
      );
    expect(await reasonsAgainst(bench)).toContain(`${first?.check.title}: not done yet`);
  });

  test("a required photo that is gone", async () => {
    const bench = await makeReviewable(db);
    await db
      .update(tables.files)
      .set({ removedAt: bench.clock.at })
      .where(eq(tables.files.unitId, bench.unit.id));
    expect(await reasonsAgainst(bench)).toContain("the required photo is missing");
  });

  test("an instrument out of calibration on the day of its reading, whatever it is today", async () => {
    const bench = await makeReviewable(db);
    const ofUnit = and(
      eq(tables.observations.unitId, bench.unit.id),
      eq(tables.observations.kind, "measured"),
    );
    await owner.update(tables.observations).set({ calibrationDue: "2026-05-03" }).where(ofUnit);
    expect(await reasonsAgainst(bench)).toContain("whose calibration ended on 2026-05-03");
    // In calibration on the day itself, though not any more: that is enough.
    await owner.update(tables.observations).set({ calibrationDue: "2026-05-04" }).where(ofUnit);
    bench.clock.at = new Date("2026-06-01T09:00:00Z");
    const electrician = bench.as("electrician");
    await signUnit(electrician, await signInput(electrician, bench.unit.number));
  });

  test("who built or inspected it doesn't sign it", async () => {
    const bench = await makeReviewable(db);
    for (const role of ["builder", "inspector"] as const) {
      const person = bench.people[role];
      await grantRoles(db, bench.workshop.id, person.id, ["electrician"]);
      await givePassword(db, [person.id]);
      await makeLicence(db, bench, { personId: person.id });
      const context = bench.asPerson(person, [role, "electrician"]);
      await expect(signUnit(context, await signInput(context, bench.unit.number))).rejects.toBeInstanceOf(
        ForbiddenError,
      );
    }
    expect(await decisionsOf(bench)).toEqual([]);
  });

  test("a failing check needs the signer's own reasons, which the record keeps", async () => {
    const bench = await makeReviewable(db);
    const [line] = (await sheetNow(bench.as("inspector"), bench.unit.number)).lines.filter(
      ({ observation }) => observation?.kind === "examined",
    );
    await owner
      .update(tables.observations)
      .set({ conforms: "no" })
      .where(eq(tables.observations.id, line?.observation?.id ?? 0));
    expect(await reasonsAgainst(bench)).toContain("A check fails");
    const electrician = bench.as("electrician");
    const departures = "The dent in the case bares nothing; it is used behind a barrier.";
    await signUnit(electrician, await signInput(electrician, bench.unit.number, { departures }));
    expect(parseRecord((await recordOf(bench)).canonicalJson).decision.departures).toBe(departures);
  });
});

describe("the act of signing", () => {
  test("a typed name is the one on the licence, which the record carries, whatever the account is called now", async () => {
    const bench = await makeReviewable(db, { licence: { holderName: "Tess Licensed" } });
    const electrician = bench.as("electrician");
    const typed = (typedName: string) =>
      signInput(electrician, bench.unit.number, { signature: { method: "typed", typedName } });
    await expect(signUnit(electrician, await typed(electrician.person.name))).rejects.toMatchObject({
      field: "typedName",
      message: expect.stringContaining("Tess Licensed"),
    });
    expect(await decisionsOf(bench)).toEqual([]);
    await signUnit(electrician, await typed("tess  licensed"));
    const { record } = await findRecord(electrician, await unitNow(electrician, bench.unit.number));
    expect(record.decision.signer).toMatchObject({
      name: electrician.person.name,
      licence: { holder: "Tess Licensed" },
    });
  });

  test("judges by the accuracy policy of the submission, also when the workshop has another one by now", async () => {
    const bench = await makeReviewable(db);
    const changed: ServiceContext = {
      ...bench.as("electrician"),
      workshop: { ...bench.as("electrician").workshop, accuracyPolicy: "maker-k2" },
    };
    const unit = await unitNow(changed, bench.unit.number);
    const uncertainties = async (context: ServiceContext) =>
      (await loadSheet(context, unit)).lines.flatMap(({ judged }) => judged?.expandedUncertainty ?? []);
    const pinned = await uncertainties(bench.as("electrician"));
    expect(pinned.length).toBeGreaterThan(0);
    expect(await uncertainties(changed)).toEqual(pinned);
    await signUnit(changed, await signInput(changed, bench.unit.number));
    const { record } = await findRecord(changed, await unitNow(changed, bench.unit.number));
    expect(record.accuracyPolicy).toBe("rect");
    // The pin is what does it: unpinned, the sheet would be judged by the workshop's policy of now.
    await db
      .update(tables.revisions)
      .set({ accuracyPolicy: null })
      .where(eq(tables.revisions.unitId, bench.unit.id));
    expect(await uncertainties(changed)).not.toEqual(pinned);
  });

  test("asks for the password again and throttles wrong ones", async () => {
    const bench = await makeReviewable(db);
    const electrician = bench.as("electrician");
    const input = await signInput(electrician, bench.unit.number, { password: "not this one" });
    for (let tries = 0; tries < 5; tries++) {
      await expect(signUnit(electrician, input)).rejects.toBeInstanceOf(AuthenticationError);
    }
    // The right one is not looked at either, until the wait is over.
    const right = await signInput(electrician, bench.unit.number);
    await expect(signUnit(electrician, right)).rejects.toBeInstanceOf(ThrottledError);
    expect(await decisionsOf(bench)).toEqual([]);
    bench.clock.at = new Date(bench.clock.at.getTime() + 16 * 60_000);
    await signUnit(electrician, right);
  });

  test("doesn't take an empty canvas for a signature", async () => {
    const bench = await makeReviewable(db);
    const electrician = bench.as("electrician");
    const png = await sharp({ create: { width: 400, height: 120, channels: 4, background: "#00000000" } })
      .png()
      .toBuffer();
    const input = await signInput(electrician, bench.unit.number, { signature: { method: "drawn", png } });
    await expect(signUnit(electrician, input)).rejects.toMatchObject({ field: "signatureImage" });
    expect(await decisionsOf(bench)).toEqual([]);
  });

  test("doesn't take another name for a typed one, nor a recheck today or in six years", async () => {
    const bench = await makeReviewable(db);
    const electrician = bench.as("electrician");
    for (const [changes, field] of [
      [{ signature: { method: "typed", typedName: "Somebody Else" } }, "typedName"],
      [{ recheckOn: "2026-05-04" }, "recheckOn"],
      [{ recheckOn: "2031-05-05" }, "recheckOn"],
    ] as const) {
      const input = await signInput(electrician, bench.unit.number, changes);
      await expect(signUnit(electrician, input)).rejects.toMatchObject({ field });
    }
    expect(await decisionsOf(bench)).toEqual([]);
    await signUnit(electrician, await signInput(electrician, bench.unit.number, { recheckOn: "2031-05-04" }));
  });
});

test("a refusal needs reasons and a licence, and makes a record of its own", async () => {
  const bench = await makeReviewable(db);
  const electrician = bench.as("electrician");
  const {
    conditions: _,
    recheckOn: __,
    departures: ___,
    ...input
  } = await signInput(electrician, bench.unit.number);
  await expect(refuseUnit(electrician, { ...input, statement: "  " })).rejects.toBeInstanceOf(GuardError);
  await refuseUnit(electrician, { ...input, statement: "The transformer is of unknown origin." });
  expect((await unitNow(electrician, bench.unit.number)).state).toBe("refused");
  const record = parseRecord((await recordOf(bench)).canonicalJson);
  expect(record.decision).toMatchObject({
    kind: "refused",
    statement: "The transformer is of unknown origin.",
    conditions: null,
    recheckOn: null,
  });

  const unlicensed = await makeReviewable(db, { licence: null });
  const other = unlicensed.as("electrician");
  const refusal = await signInput(other, unlicensed.unit.number);
  await expect(refuseUnit(other, refusal)).rejects.toBeInstanceOf(GuardError);
});

test("sending back makes a finding of the reason and opens a revision for the rework", async () => {
  const bench = await makeReviewable(db);
  const electrician = bench.as("electrician");
  const { version } = await unitNow(electrician, bench.unit.number);
  const input = { unitNumber: bench.unit.number, expectedVersion: version, severity: "defect" as const };
  await expect(sendBackFromReview(electrician, { ...input, reason: " " })).rejects.toBeInstanceOf(GuardError);
  await sendBackFromReview(electrician, { ...input, reason: "The cord grip doesn't hold the cord." });
  expect(await unitNow(electrician, bench.unit.number)).toMatchObject({ state: "sent_back", revision: 2 });
  const opened = await loadRevision(db, await unitNow(electrician, bench.unit.number));
  expect(opened.sentBack).toEqual({
    reason: "The cord grip doesn't hold the cord.",
    by: electrician.person.name,
  });
  const findings = await db.select().from(tables.findings).where(eq(tables.findings.unitId, bench.unit.id));
  expect(findings).toMatchObject([
    { number: 1, severity: "defect", text: "The cord grip doesn't hold the cord.", closedAt: null },
  ]);
  const mails = await db
    .select()
    .from(tables.outbox)
    .where(eq(tables.outbox.subject, `Unit ${bench.unit.number} was sent back: Unit ${bench.unit.number}`));
  expect(mails).toHaveLength(2);
  await expect(sendBackFromReview(electrician, { ...input, reason: "Once more." })).rejects.toBeInstanceOf(
    ConflictError,
  );
});
