import { eq } from "drizzle-orm";
import { inTransaction, tables } from "~/db/client.server";
import { emptyMap } from "~/engine/energy-map";
import { appendEntry } from "~/services/audit/append-entry.server";
import type { ServiceContext } from "~/services/context.server";
import { ForbiddenError } from "~/services/errors";
import { decide } from "~/workflow/permissions";
import type { UnitDetails } from "./unit-details";

const { revisions, units, workshops } = tables;

/**
 * Makes a unit with the workshop's next number, in state "draft", with an empty map as its first revision.
 *
 * @returns the unit's number
 * @throws ForbiddenError
 */
export function createUnit(context: ServiceContext, details: UnitDetails): Promise<number> {
  const decision = decide("unit.create", { id: context.person.id, roles: context.workshop.roles });
  if (!decision.allowed) throw new ForbiddenError(decision.reason);
  return inTransaction(context.db, async (tx) => {
    const at = context.now();
    const [workshop] = await tx
      .select({
        nextUnitNumber: workshops.nextUnitNumber,
        ruleSetKey: workshops.ruleSetKey,
        ruleSetVersion: workshops.ruleSetVersion,
      })
      .from(workshops)
      .where(eq(workshops.id, context.workshop.id))
      .for("update");
    if (!workshop) throw new Error(`Workshop ${context.workshop.id} is gone.`);
    const number = workshop.nextUnitNumber;
    await tx
      .update(workshops)
      .set({ nextUnitNumber: number + 1 })
      .where(eq(workshops.id, context.workshop.id));
    const [unit] = await tx
      .insert(units)
      .values({
        ...details,
        workshopId: context.workshop.id,
        number,
        builderId: context.person.id,
        state: "draft",
        revision: 1,
        version: 1,
        createdAt: at,
        changedAt: at,
      })
      .$returningId();
    if (!unit) throw new Error("The unit got no id.");
    await tx.insert(revisions).values({
      unitId: unit.id,
      number: 1,
      map: emptyMap,
      ruleSetKey: workshop.ruleSetKey,
      ruleSetVersion: workshop.ruleSetVersion,
      createdAt: at,
    });
    await appendEntry(tx, {
      workshopId: context.workshop.id,
      at,
      actorId: context.person.id,
      act: "unit.create",
      unitId: unit.id,
      toState: "draft",
      detail: { number },
    });
    return number;
  });
}
