import { eq } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError } from "~/services/errors";
import { actOnUnit, type UnitActInput } from "~/services/unit-act.server";
import { listRevisions } from "./load-revision.server";

/**
 * Throws away a draft that was never submitted: it is gone from every list and address. Its number is not given again
 * and its rows stay, because the trail names them.
 *
 * @throws NotFoundError, ForbiddenError, ConflictError
 */
export function discardUnit(context: ServiceContext, input: UnitActInput): Promise<void> {
  return actOnUnit(context, "unit.discard", input, async ({ tx, unit, at }) => {
    const submitted = (await listRevisions(tx, unit.id)).some((revision) => revision.submittedAt !== null);
    if (submitted) throw new ConflictError("This unit has been submitted before; it can't be discarded.");
    await tx.update(tables.units).set({ discardedAt: at }).where(eq(tables.units.id, unit.id));
    return { result: undefined };
  });
}
