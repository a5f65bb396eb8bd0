import type { RouterContextProvider } from "react-router";
import type { ServiceContext } from "~/services/context.server";
import { NotFoundError } from "~/services/errors";
import { findUnit, type StandingUnit } from "~/services/unit-act.server";
import { type Action, decide } from "~/workflow/permissions";
import { answerTo, refusal } from "./answers.server";
import { serviceContext } from "./workshop.server";

/**
 * The first line of every loader and action below a workshop: asks the permission table, and gives what services
 * need. For actions that concern no single unit.
 *
 * @throws a 403 answer with the reason
 */
export function authorise(context: Readonly<RouterContextProvider>, action: Action): ServiceContext {
  const services = serviceContext(context);
  const decision = decide(action, { id: services.person.id, roles: services.workshop.roles });
  if (!decision.allowed) throw refusal(403, decision.reason);
  return services;
}

/**
 * The same for an action on one unit of the workshop, named by the number in its address. Services ask again under
 * the row lock; this answers early and gives the unit for reading.
 *
 * @throws a 404 answer when the workshop has no such unit, a 403 answer with the reason
 */
export async function authoriseUnit(
  context: Readonly<RouterContextProvider>,
  action: Action,
  unitNumber: string | undefined,
): Promise<{ services: ServiceContext; unit: StandingUnit }> {
  const services = serviceContext(context);
  const unit = /^[1-9]\d{0,8}$/.test(unitNumber ?? "")
    ? await findUnit(services.db, services.workshop.id, Number(unitNumber))
    : null;
  if (!unit) throw answerTo(new NotFoundError("The unit"));
  const decision = decide(action, { id: services.person.id, roles: services.workshop.roles }, unit);
  if (!decision.allowed) throw refusal(403, decision.reason);
  return { services, unit };
}
