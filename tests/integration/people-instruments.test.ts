import { eq } from "drizzle-orm";
import { expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { database } from "~/services/database.server";
import { ForbiddenError, NotFoundError } from "~/services/errors";
import {
  addInstrument,
  addRange,
  getInstrument,
  listInstruments,
  recalibrate,
  removeRange,
  setRetired,
} from "~/services/instruments/instruments.server";
import { expiries } from "~/services/overview.server";
import { findWorkshop } from "~/services/people/workshops.server";
import { changeSettings, settingsOf } from "~/services/workshop-settings.server";
import { makeInstrument, makeLicence, makeWorkshop } from "../fixtures/workshop";

const db = database();

const meter = {
  name: "Bench meter",
  kind: "insulation-tester" as const,
  serial: "SN-7",
  calibratedOn: "2026-01-15",
  calibrationDue: "2027-01-15",
  certificate: "C-7",
};
const range = { unit: "MΩ", lower: 0, upper: 200, percent: 3, digits: 5, resolution: 0.01 };

async function acts(workshopId: number): Promise<string[]> {
  const rows = await db
    .select({ act: tables.auditEntries.act })
    .from(tables.auditEntries)
    .where(eq(tables.auditEntries.workshopId, workshopId))
    .orderBy(tables.auditEntries.sequence);
  return rows.map((row) => row.act);
}

test("an instrument is added, gets ranges, is calibrated again, retired and taken back, all in the trail", async () => {
  const { as, workshop } = await makeWorkshop(db);
  const steward = as("steward");
  const id = await addInstrument(steward, meter);
  await addRange(steward, id, range);
  await addRange(steward, id, { ...range, unit: "V", upper: 600 });
  const both = await getInstrument(steward, id);
  expect(both).toMatchObject({ ...meter, retired: false });
  expect(both.ranges.map(({ unit }) => unit)).toEqual(["MΩ", "V"]);
  await removeRange(steward, id, both.ranges[1]?.id ?? 0);
  const renewed = { calibratedOn: "2027-01-10", calibrationDue: "2028-01-10", certificate: "C-8" };
  await recalibrate(steward, id, renewed);
  expect(await getInstrument(steward, id)).toMatchObject({ ...renewed, ranges: [range] });

  await setRetired(steward, id, true);
  await setRetired(steward, id, true);
  expect(await listInstruments(steward)).toEqual([]);
  expect(await listInstruments(steward, { withRetired: true })).toMatchObject([{ id, retired: true }]);
  await expect(addRange(steward, id, range)).rejects.toThrow("retired");
  await expect(recalibrate(steward, id, renewed)).rejects.toThrow("retired");
  await setRetired(steward, id, false);
  expect(await listInstruments(steward)).toMatchObject([{ id, retired: false }]);

  expect(await acts(workshop.id)).toEqual([
    "instrument.add",
    "instrument.add-range",
    "instrument.add-range",
    "instrument.remove-range",
    "instrument.recalibrate",
    "instrument.retire",
    "instrument.take-back",
  ]);
});

test("a serial number belongs to one instrument of a workshop, and may recur in another", async () => {
  const [ours, theirs] = [await makeWorkshop(db), await makeWorkshop(db)];
  await addInstrument(ours.as("steward"), meter);
  await expect(addInstrument(ours.as("steward"), meter)).rejects.toMatchObject({ field: "serial" });
  await addInstrument(theirs.as("steward"), meter);
});

test("instruments of another workshop can be neither seen nor changed", async () => {
  const [ours, theirs] = [await makeWorkshop(db), await makeWorkshop(db)];
  const foreign = await makeInstrument(db, theirs);
  const [foreignRange] = (await getInstrument(theirs.as("steward"), foreign)).ranges;
  const steward = ours.as("steward");
  expect(await listInstruments(steward, { withRetired: true })).toEqual([]);
  for (const attempt of [
    () => getInstrument(steward, foreign),
    () => addRange(steward, foreign, range),
    () => removeRange(steward, foreign, foreignRange?.id ?? 0),
    () => recalibrate(steward, foreign, meter),
    () => setRetired(steward, foreign, true),
  ]) {
    await expect(attempt()).rejects.toThrow(NotFoundError);
  }
  const own = await makeInstrument(db, ours);
  await removeRange(steward, own, foreignRange?.id ?? 0);
  expect((await getInstrument(theirs.as("steward"), foreign)).ranges).toHaveLength(1);
  expect((await getInstrument(steward, own)).ranges).toHaveLength(1);
});

test("only a steward changes instruments", async () => {
  const { as } = await makeWorkshop(db);
  for (const role of ["builder", "inspector", "electrician", "archivist"] as const) {
    await expect(addInstrument(as(role), meter)).rejects.toThrow(ForbiddenError);
  }
});

test("settings change as one, with before and after in the trail", async () => {
  const { as, workshop, people } = await makeWorkshop(db);
  const before = settingsOf(workshop);
  const after = { ...before, name: "Hall of Sparks", recheckMonths: 6, ruleSetKey: "uk-in-service" };
  await changeSettings(as("steward"), { expected: before, settings: after });
  const now = await findWorkshop(db, workshop.slug, people.steward.id);
  expect(now && settingsOf(now)).toEqual(after);
  const [entry] = await db
    .select()
    .from(tables.auditEntries)
    .where(eq(tables.auditEntries.workshopId, workshop.id));
  expect(entry).toMatchObject({
    act: "workshop.settings",
    detail: {
      name: [before.name, "Hall of Sparks"],
      recheckMonths: [12, 6],
      ruleSetKey: ["eu-after-repair", "uk-in-service"],
    },
  });
  await changeSettings(as("steward"), { expected: after, settings: after });
  expect(await acts(workshop.id)).toHaveLength(1);
});

test("settings that somebody else changed meanwhile are not overwritten", async () => {
  const { as, workshop } = await makeWorkshop(db);
  const before = settingsOf(workshop);
  await changeSettings(as("steward"), { expected: before, settings: { ...before, recheckMonths: 6 } });
  await expect(
    changeSettings(as("steward"), { expected: before, settings: { ...before, name: "Other" } }),
  ).rejects.toMatchObject({ status: 409 });
});

test("a time zone or a rule set that doesn't exist is refused", async () => {
  const { as, workshop } = await makeWorkshop(db);
  const expected = settingsOf(workshop);
  const attempt = (changes: Partial<typeof expected>) =>
    changeSettings(as("steward"), { expected, settings: { ...expected, ...changes } });
  await expect(attempt({ timeZone: "Middle/Earth" })).rejects.toMatchObject({ field: "timeZone" });
  await expect(attempt({ ruleSetVersion: "99" })).rejects.toMatchObject({ field: "ruleSet" });
});

test("stewards hear of what runs out within a month, of overdue calibrations for good, of nothing else", async () => {
  // The tests' day is 4 May 2026.
  const made = await makeWorkshop(db);
  await makeInstrument(db, made, { name: "Soon", calibrationDue: "2026-06-03" });
  await makeInstrument(db, made, { name: "Later", calibrationDue: "2026-06-04" });
  await makeInstrument(db, made, {
    name: "Long over",
    calibratedOn: "2024-01-01",
    calibrationDue: "2025-01-01",
  });
  await makeInstrument(db, made, { name: "Retired", calibrationDue: "2026-05-10", retiredAt: new Date() });
  await makeLicence(db, made, { validTo: "2026-05-04" });
  await makeLicence(db, made, { validTo: "2026-03-01" });
  await makeLicence(db, made, { validTo: "2026-05-20", revokedAt: new Date() });
  expect(await expiries(made.as("steward"))).toEqual([
    { kind: "instrument", name: "Long over", day: "2025-01-01", over: true },
    { kind: "licence", name: "Test electrician", day: "2026-05-04", over: false },
    { kind: "instrument", name: "Soon", day: "2026-06-03", over: false },
  ]);
});
