import { asc, eq } from "drizzle-orm";
import { beforeEach, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { loadCheck } from "~/services/bench/load-check.server";
import {
  type AnswerInput,
  type ObservationInput,
  recordObservation,
} from "~/services/bench/record-observation.server";
import { database } from "~/services/database.server";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "~/services/errors";
import {
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
import { makeInstrument, makeMember, makeWorkshop } from "../fixtures/workshop";

const db = database();
let bench: TestBench;
beforeEach(async () => {
  bench = await makeBench(db);
});

type Measured = Extract<AnswerInput, { kind: "measured" }>;

/** A reading for the sheet's first maximum, at a share of its limit, with changes. */
async function reading(
  share = 0.5,
  changes: Partial<Omit<ObservationInput, "answer">> & { answer?: Partial<Measured> } = {},
) {
  const check = await readingCheck(bench.as("inspector"), bench.unit.number);
  const input: ObservationInput = {
    unitNumber: bench.unit.number,
    checkKey: check.key,
    latestId: null,
    reason: null,
    note: null,
    ...changes,
    answer: {
      kind: "measured",
      value: check.limit.value * share,
      bound: null,
      unit: check.limit.unit,
      instrumentId: bench.instrumentOf[check.asks.instrument.kind],
      conditions: "",
      ...changes.answer,
    },
  };
  return { check, input };
}

const rowsOf = (unitId: number) =>
  db
    .select()
    .from(tables.observations)
    .where(eq(tables.observations.unitId, unitId))
    .orderBy(asc(tables.observations.id));

test("a correction is a new row with a reason; what it corrects stays as it was", async () => {
  const inspector = bench.as("inspector");
  const { check, input } = await reading(2);
  const first = await recordObservation(inspector, input);
  const before = await rowsOf(bench.unit.id);
  expect((await lineNow(inspector, bench.unit.number, check.key)).verdict).toBe("fail");

  const corrected = (await reading(0.5, { latestId: first })).input;
  await expect(recordObservation(inspector, corrected)).rejects.toMatchObject({ field: "reason" });
  const second = await recordObservation(inspector, { ...corrected, reason: "The probe had slipped off" });

  const [old, fresh] = await rowsOf(bench.unit.id);
  expect(old).toEqual(before[0]);
  expect(fresh).toMatchObject({ id: second, correctsId: first, reason: "The probe had slipped off" });
  const line = await lineNow(inspector, bench.unit.number, check.key);
  expect(line.history.map(({ id }) => id)).toEqual([second, first]);
  expect(line.judged?.verdict).toBe("pass");
});

test("a form made before somebody else's answer is refused, and nothing is written", async () => {
  const inspector = bench.as("inspector");
  const { input } = await reading();
  await recordObservation(inspector, input);
  await expect(recordObservation(inspector, input)).rejects.toThrow(ConflictError);
  await expect(recordObservation(inspector, { ...input, latestId: 999_999 })).rejects.toThrow(ConflictError);
  expect(await rowsOf(bench.unit.id)).toHaveLength(1);
});

test("the same form sent twice at once is written once", async () => {
  const { input } = await reading();
  const twice = await Promise.allSettled([
    recordObservation(bench.as("inspector"), input),
    recordObservation(bench.as("inspector"), input),
  ]);
  expect(twice.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
  expect(await rowsOf(bench.unit.id)).toHaveLength(1);
});

test("the trail names the check and the observation", async () => {
  const { check, input } = await reading();
  const id = await recordObservation(bench.as("inspector"), input);
  const entries = await db
    .select()
    .from(tables.auditEntries)
    .where(eq(tables.auditEntries.unitId, bench.unit.id));
  expect(entries).toMatchObject([
    {
      act: "bench.observe",
      actorId: bench.people.inspector.id,
      detail: { check: check.key, observation: id },
    },
  ]);
});

test("only the inspector who has the unit on the bench answers", async () => {
  const { input } = await reading();
  const other = bench.asPerson(await makeMember(db, bench, ["inspector"]), ["inspector"]);
  await expect(recordObservation(other, input)).rejects.toThrow(ForbiddenError);
  await expect(recordObservation(bench.as("electrician"), input)).rejects.toThrow(ForbiddenError);
  await db
    .update(tables.units)
    .set({ state: "awaiting_signature" })
    .where(eq(tables.units.id, bench.unit.id));
  await expect(recordObservation(bench.as("inspector"), input)).rejects.toThrow(ForbiddenError);
  const elsewhere = await makeWorkshop(db);
  await expect(recordObservation(elsewhere.as("inspector"), input)).rejects.toThrow(NotFoundError);
  expect(await rowsOf(bench.unit.id)).toHaveLength(0);
});

test("an instrument out of calibration is refused in words, from the day after its last one in the workshop's zone", async () => {
  const { check } = await reading();
  const instrumentId = await makeInstrument(db, bench, {
    name: "Old meter",
    kind: check.asks.instrument.kind,
    calibrationDue: "2026-05-04",
  });
  const { input } = await reading(0.5, { answer: { instrumentId } });
  // 23:30 in Berlin, still its last day.
  bench.clock.at = new Date("2026-05-04T21:30:00Z");
  const id = await recordObservation(bench.as("inspector"), input);
  // Half past midnight in Berlin, still the 4th in UTC.
  bench.clock.at = new Date("2026-05-04T22:30:00Z");
  const late = recordObservation(bench.as("inspector"), { ...input, latestId: id, reason: "Again" });
  await expect(late).rejects.toMatchObject({
    field: "instrumentId",
    message: expect.stringContaining("Old meter") as string,
  });
  await expect(late).rejects.toThrow("out of calibration since 4 May 2026");
  expect(await rowsOf(bench.unit.id)).toHaveLength(1);
});

test("an instrument of another kind, of another workshop or out of use is refused", async () => {
  const { check } = await reading();
  const kind = check.asks.instrument.kind;
  const others = [
    await makeInstrument(db, bench, { kind: kind === "caliper" ? "thermometer" : "caliper" }),
    await makeInstrument(db, await makeWorkshop(db), { kind }),
    await makeInstrument(db, bench, { kind, retiredAt: bench.clock.at }),
    999_999,
  ];
  for (const instrumentId of others) {
    const { input } = await reading(0.5, { answer: { instrumentId } });
    await expect(recordObservation(bench.as("inspector"), input)).rejects.toMatchObject({
      field: "instrumentId",
    });
  }
});

test("a reading can't be negative, no number, or in a unit of something else", async () => {
  for (const [answer, field] of [
    [{ value: -0.1 }, "value"],
    [{ value: Number.NaN }, "value"],
    [{ unit: "furlong" }, "unit"],
  ] as const) {
    const { input } = await reading(0.5, { answer });
    await expect(recordObservation(bench.as("inspector"), input)).rejects.toMatchObject({ field });
  }
  const { input } = await reading();
  const examined = recordObservation(bench.as("inspector"), {
    ...input,
    answer: { kind: "examined", conforms: true },
  });
  await expect(examined).rejects.toThrow(InvalidInputError);
});

test("“not applicable” and “not possible” need a reason", async () => {
  const { check, input } = await reading();
  for (const kind of ["not-applicable", "not-possible"] as const) {
    const bare = recordObservation(bench.as("inspector"), { ...input, answer: { kind }, reason: "  " });
    await expect(bare).rejects.toMatchObject({ field: "reason" });
  }
  await recordObservation(bench.as("inspector"), {
    ...input,
    answer: { kind: "not-possible" },
    reason: "The terminal can't be reached without breaking a seal",
  });
  const line = await lineNow(bench.as("inspector"), bench.unit.number, check.key);
  expect(line.observation).toMatchObject({ kind: "not-possible", by: bench.people.inspector.name });
  expect(line.judged).toBeNull();
});

test("a check of another map is not answered", async () => {
  const { input } = await reading(0.5, { checkKey: "no-such-check" });
  await expect(recordObservation(bench.as("inspector"), input)).rejects.toThrow(NotFoundError);
});

test("a reading keeps the accuracy and the calibration of its day, whatever becomes of the instrument", async () => {
  const { check, input } = await reading();
  await recordObservation(bench.as("inspector"), input);
  const before = await lineNow(bench.as("inspector"), bench.unit.number, check.key);
  const instrumentId = bench.instrumentOf[check.asks.instrument.kind];
  await db.update(tables.instrumentRanges).set({ percent: 90 });
  await db
    .update(tables.instruments)
    .set({ calibratedOn: "2026-06-01", calibrationDue: "2026-06-02" })
    .where(eq(tables.instruments.id, instrumentId));
  const after = await lineNow(bench.as("inspector"), bench.unit.number, check.key);
  expect(after.judged).toEqual(before.judged);
  expect(after.observation?.instrument?.calibrationDue).toBe("2027-01-15");
});

test("a coarse instrument leaves a reading near the limit undecided, and says what would decide it", async () => {
  const { check } = await reading();
  const { value: limit, unit } = check.limit;
  const coarse = await makeInstrument(db, bench, {
    kind: check.asks.instrument.kind,
    ranges: [{ unit, lower: 0, upper: limit * 10, percent: 10, digits: 0, resolution: limit / 1000 }],
  });
  const { input } = await reading(0.97, { answer: { instrumentId: coarse } });
  await recordObservation(bench.as("inspector"), input);
  const line = await lineNow(bench.as("inspector"), bench.unit.number, check.key);
  expect(line.verdict).toBe("undecided");
  expect(line.judged?.neededAccuracy).toContain("would decide it");
  // "rect" policy: U = 2·(10 % of 0.97 L)/√3 (JCGM 100, rectangular distribution).
  expect(line.judged?.expandedUncertainty).toBeCloseTo((2 * 0.097 * limit) / Math.sqrt(3), 9);
});

test("an examination is answered by yes or no and combined with the map's own answer", async () => {
  const inspector = bench.as("inspector");
  const check = await examinationCheck(inspector, bench.unit.number);
  const base = { unitNumber: bench.unit.number, checkKey: check.key, reason: null, note: "Looked twice" };
  const first = await recordObservation(inspector, {
    ...base,
    latestId: null,
    answer: { kind: "examined", conforms: true },
  });
  expect(await lineNow(inspector, bench.unit.number, check.key)).toMatchObject({ verdict: "pass" });
  await recordObservation(inspector, {
    ...base,
    latestId: first,
    reason: "A crack on the far side",
    answer: { kind: "examined", conforms: false },
  });
  expect(await lineNow(inspector, bench.unit.number, check.key)).toMatchObject({ verdict: "fail" });
});

test("who and when stand with each reading, to the millisecond", async () => {
  const { check, input } = await reading();
  bench.clock.at = new Date("2026-05-05T10:15:00.123Z");
  await recordObservation(bench.as("inspector"), input);
  const { observation } = await lineNow(bench.as("inspector"), bench.unit.number, check.key);
  expect(observation?.at).toEqual(new Date("2026-05-05T10:15:00.123Z"));
  expect((await unitNow(bench.as("inspector"), bench.unit.number)).version).toBe(2);
});

test("a step with mains on is refused while earth, insulation or isolation has not passed, unless a reason is given", async () => {
  const inspector = bench.as("inspector");
  const { number } = bench.unit;
  const { lines } = await sheetNow(inspector, number);
  const earth = lines.find(
    ({ check }) => check.family === "protective-earth" && check.asks.kind === "reading",
  );
  const live = lines.find(({ check }) => check.energised && check.asks.kind === "reading");
  if (!earth || !live) throw new Error("The sheet has no earth reading or no live one.");
  const failing = goodAnswer(earth.check, bench.instrumentOf);
  if (failing.kind !== "measured") throw new Error("The earth is not measured.");
  await recordObservation(inspector, {
    unitNumber: number,
    checkKey: earth.check.key,
    latestId: null,
    answer: { ...failing, value: failing.value * 100 },
    reason: null,
    note: null,
  });
  const input: ObservationInput = {
    unitNumber: number,
    checkKey: live.check.key,
    latestId: null,
    answer: goodAnswer(live.check, bench.instrumentOf),
    reason: null,
    note: null,
  };
  const refusal: unknown = await recordObservation(inspector, input).catch((error: unknown) => error);
  expect(refusal).toMatchObject({ field: "reason" });
  expect(String(refusal)).toContain("Do not connect mains");
  expect(String(refusal)).toContain(`${earth.check.title}: failed.`);
  expect(
    (await loadCheck(inspector, await unitNow(inspector, number), live.check.key)).beforeMains,
  ).toContain(`${earth.check.title}: failed.`);

  const reason = "Behind an isolating transformer";
  const id = await recordObservation(inspector, { ...input, reason });
  expect((await lineNow(inspector, number, live.check.key)).observation).toMatchObject({ id, reason });
});

test("once every dead check has passed, a step with mains on needs no reason", async () => {
  const inspector = bench.as("inspector");
  const { number } = bench.unit;
  const liveKeys = (await sheetNow(inspector, number)).lines
    .filter(({ check }) => check.energised)
    .map(({ check }) => check.key);
  await answerAll(db, bench, liveKeys);
  for (const key of liveKeys) {
    const { check } = await lineNow(inspector, number, key);
    await recordObservation(inspector, {
      unitNumber: number,
      checkKey: key,
      latestId: null,
      answer: goodAnswer(check, bench.instrumentOf),
      reason: null,
      note: null,
    });
  }
  expect(liveKeys.length).toBeGreaterThan(2);
});
