import { eq } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { actOnUnit, type UnitActInput } from "~/services/unit-act.server";
import type { UnitDetails } from "./unit-details";

/**
 * Changes what is said about a unit while it is being drafted or reworked.
 *
 * @throws NotFoundError, ForbiddenError, ConflictError
 */
export function editDetails(
  context: ServiceContext,
  input: UnitActInput & { details: UnitDetails },
): Promise<void> {
  return actOnUnit(context, "unit.edit", input, async ({ tx, unit }) => {
    await tx.update(tables.units).set(input.details).where(eq(tables.units.id, unit.id));
    return { result: undefined };
  });
}
