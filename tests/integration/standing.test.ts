import { expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { standingOf } from "~/services/archive/standing.server";
import { countQueues } from "~/services/bench/queue-counts.server";
import { database } from "~/services/database.server";
import { recentUnits, unitsInHand } from "~/services/overview.server";
import { listUnits } from "~/services/units/list-units.server";
import { makeLicence, makeUnit, makeWorkshop, TEST_MOMENT, type TestWorkshop } from "../fixtures/workshop";

const db = database();
const TODAY = "2026-05-04";

async function makeSigned(
  workshop: TestWorkshop,
  name: string,
  recheckOn: string,
  departures: string | null,
) {
  const unit = await makeUnit(db, workshop, { name, state: "signed" });
  await db.insert(tables.decisions).values({
    unitId: unit.id,
    revisionId: unit.revisionId,
    kind: "signed",
    signerId: workshop.people.electrician.id,
    licenceId: await makeLicence(db, workshop),
    statement: "It may be plugged in.",
    departures,
    conditions: { place: "", supply: "", load: "", supervision: "", other: "" },
    recheckOn,
    signatureMethod: "typed",
    typedName: workshop.people.electrician.name,
    decidedAt: TEST_MOMENT,
  });
  return unit;
}

test("lists tell how a signature stands today, and that it was given despite failing checks", async () => {
  const workshop = await makeWorkshop(db);
  await makeSigned(workshop, "Good", "2027-05-04", null);
  await makeSigned(workshop, "Departs", "2027-05-04", "The scratch is only in the paint.");
  await makeSigned(workshop, "Departs and due", "2026-05-20", "The scratch is only in the paint.");
  const lapsed = await makeSigned(workshop, "Lapsed", "2026-05-03", null);
  await makeUnit(db, workshop, { name: "Draft" });
  const expected = {
    Good: { validity: "may-be-used", departures: false },
    Departs: { validity: "may-be-used", departures: true },
    "Departs and due": { validity: "recheck-due", departures: true },
    Lapsed: { validity: "lapsed", departures: false },
    Draft: null,
  };
  const byName = (rows: readonly { name: string; standing: unknown }[]) =>
    Object.fromEntries(rows.map(({ name, standing }) => [name, standing]));
  const { units } = await listUnits(db, {
    workshopId: workshop.workshop.id,
    today: TODAY,
    sort: { by: "number", direction: "asc" },
    page: 1,
  });
  expect(byName(units)).toEqual(expected);
  expect(byName(await recentUnits(workshop.as("archivist")))).toEqual(expected);
  const unit = { id: lapsed.id, state: "signed" as const };
  expect(await standingOf(db, unit, "2026-05-03")).toMatchObject({ validity: "recheck-due" });
  expect(await standingOf(db, { ...unit, state: "withdrawn" }, TODAY)).toBeNull();
});

test("a discarded draft waits for nobody and is listed nowhere", async () => {
  const workshop = await makeWorkshop(db);
  await makeUnit(db, workshop, { discardedAt: TEST_MOMENT });
  const kept = await makeUnit(db, workshop, { name: "Kept" });
  const builder = workshop.as("builder");
  expect(await unitsInHand(builder)).toMatchObject([{ number: kept.number }]);
  expect(await recentUnits(builder)).toMatchObject([{ number: kept.number }]);
  expect(await countQueues(builder)).toMatchObject({ yours: { drafts: 1 }, states: { draft: 1 } });
});
