import { eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { EnergyMap } from "~/engine/energy-map";
import { appendEntry } from "~/services/audit/append-entry.server";
import type { ServiceContext } from "~/services/context.server";
import type { UnitDetails } from "./unit-details";

const { revisions, units, workshops } = tables;

/** The number that a new unit gets, and what its first revision is judged by unless that changes before submission. */
export interface UnitNumber {
  number: number;
  ruleSetKey: string;
  ruleSetVersion: string;
}

/** Takes the workshop's next unit number. Holds the workshop's row until the transaction ends: one after another. */
export async function takeUnitNumber(tx: Transaction, workshopId: number): Promise<UnitNumber> {
  const [workshop] = await tx
    .select({
      number: workshops.nextUnitNumber,
      ruleSetKey: workshops.ruleSetKey,
      ruleSetVersion: workshops.ruleSetVersion,
    })
    .from(workshops)
    .where(eq(workshops.id, workshopId))
    .for("update");
  if (!workshop) throw new Error(`Workshop ${workshopId} is gone.`);
  await tx
    .update(workshops)
    .set({ nextUnitNumber: workshop.number + 1 })
    .where(eq(workshops.id, workshopId));
  return workshop;
}

/** Writes a unit of the acting person, in state "draft", with its first revision and its entry in the trail. */
export async function insertUnit(
  context: ServiceContext,
  tx: Transaction,
  unit: {
    details: UnitDetails;
    map: EnergyMap;
    numbered: UnitNumber;
    at: Date;
    predecessor?: { id: number; number: number };
  },
): Promise<{ id: number; number: number }> {
  const { details, map, numbered, at, predecessor } = unit;
  const [row] = await tx
    .insert(units)
    .values({
      ...details,
      workshopId: context.workshop.id,
      number: numbered.number,
      builderId: context.person.id,
      predecessorId: predecessor?.id ?? null,
      state: "draft",
      revision: 1,
      version: 1,
      createdAt: at,
      changedAt: at,
    })
    .$returningId();
  if (!row) throw new Error("The unit got no id.");
  await tx.insert(revisions).values({
    unitId: row.id,
    number: 1,
    map,
    ruleSetKey: numbered.ruleSetKey,
    ruleSetVersion: numbered.ruleSetVersion,
    createdAt: at,
  });
  await appendEntry(tx, {
    workshopId: context.workshop.id,
    at,
    actorId: context.person.id,
    act: "unit.create",
    unitId: row.id,
    toState: "draft",
    detail: { number: numbered.number, ...(predecessor ? { predecessor: predecessor.number } : {}) },
  });
  return { id: row.id, number: numbered.number };
}
