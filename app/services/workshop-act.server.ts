import { eq } from "drizzle-orm";
import { inTransaction, tables, type Transaction } from "~/db/client.server";
import { appendEntry } from "~/services/audit/append-entry.server";
import type { ServiceContext } from "~/services/context.server";
import { ForbiddenError, NotFoundError } from "~/services/errors";
import { rolesHeld } from "~/services/people/role-holders.server";
import { type Action, decide } from "~/workflow/permissions";

const { workshops } = tables;

export interface WorkshopAct {
  tx: Transaction;
  /** The workshop's row, under its lock. */
  workshop: typeof workshops.$inferSelect;
  at: Date;
}

/**
 * Does something to a workshop's own affairs: people, licences, instruments, settings. Locks the workshop's row, so
 * that such acts come one after another, asks the permission table again with the roles held at that moment, does the
 * work and appends the audit entry, all in one transaction.
 *
 * `act` names the entry ("area.what"); no entry is written when `work` says that nothing changed.
 * @throws ForbiddenError
 */
export function actOnWorkshop<T>(
  context: ServiceContext,
  action: Action,
  act: string,
  work: (act: WorkshopAct) => Promise<{ result: T; detail?: Record<string, unknown>; unchanged?: boolean }>,
): Promise<T> {
  return inTransaction(context.db, async (tx) => {
    const [workshop] = await tx
      .select()
      .from(workshops)
      .where(eq(workshops.id, context.workshop.id))
      .for("update");
    if (!workshop) throw new NotFoundError("The workshop");
    const roles = await rolesHeld(tx, workshop.id, context.person.id);
    const decision = decide(action, { id: context.person.id, roles });
    if (!decision.allowed) throw new ForbiddenError(decision.reason);
    const at = context.now();
    const { result, detail, unchanged } = await work({ tx, workshop, at });
    if (!unchanged) {
      await appendEntry(tx, { workshopId: workshop.id, at, actorId: context.person.id, act, detail });
    }
    return result;
  });
}
