import { data, type MiddlewareFunction, type RouterContextProvider } from "react-router";
import { personContext, workshopContext } from "~/context";
import { environment } from "~/environment.server";
import type { ServiceContext } from "~/services/context.server";
import { database } from "~/services/database.server";
import { findWorkshop } from "~/services/people/workshops.server";
import { requirePerson } from "./session.server";

/**
 * Stands on every route with a `:workshop` parameter: somebody must be signed in and belong to that workshop.
 * To everybody else the workshop doesn't exist.
 */
export const workshopMiddleware: MiddlewareFunction<Response> = async ({ url, params, context }, next) => {
  const person = requirePerson(context, url);
  const workshop = params.workshop ? await findWorkshop(database(), params.workshop, person.id) : null;
  if (!workshop) throw data("There is no such workshop among yours.", { status: 404 });
  context.set(workshopContext, workshop);
  return next();
};

/** What services are given, for the person and workshop of this request. */
export function serviceContext(context: Readonly<RouterContextProvider>): ServiceContext {
  const person = context.get(personContext);
  if (!person) throw data("Nobody is signed in.", { status: 401 });
  return {
    db: database(),
    person,
    workshop: context.get(workshopContext),
    appUrl: environment().APP_URL,
    now: () => new Date(),
  };
}
