import { inTransaction } from "~/db/client.server";
import { emptyMap } from "~/engine/energy-map";
import type { ServiceContext } from "~/services/context.server";
import { ForbiddenError } from "~/services/errors";
import { rolesHeld } from "~/services/people/role-holders.server";
import { decide } from "~/workflow/permissions";
import { insertUnit, takeUnitNumber } from "./insert-unit.server";
import type { UnitDetails } from "./unit-details";

/**
 * Makes a unit with the workshop's next number, in state "draft", with an empty map as its first revision.
 *
 * @returns the unit's number
 * @throws ForbiddenError
 */
export function createUnit(context: ServiceContext, details: UnitDetails): Promise<number> {
  return inTransaction(context.db, async (tx) => {
    const numbered = await takeUnitNumber(tx, context.workshop.id);
    const roles = await rolesHeld(tx, context.workshop.id, context.person.id);
    const decision = decide("unit.create", { id: context.person.id, roles });
    if (!decision.allowed) throw new ForbiddenError(decision.reason);
    const { number } = await insertUnit(context, tx, { details, map: emptyMap, numbered, at: context.now() });
    return number;
  });
}
