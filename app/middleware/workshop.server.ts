import type { MiddlewareFunction, RouterContextProvider } from "react-router";
import { personContext, workshopContext } from "~/context";
import { environment } from "~/environment.server";
import type { ServiceContext } from "~/services/context.server";
import { database } from "~/services/database.server";
import { findWorkshop } from "~/services/people/workshops.server";
import { problemResponse, refusal } from "./answers.server";
import { requirePerson } from "./session.server";

const NO_SUCH_WORKSHOP = "There is no such workshop among yours.";

/**
 * Stands on every route with a `:workshop` parameter: somebody must be signed in and belong to that workshop.
 * To everybody else the workshop doesn't exist.
 */
export const workshopMiddleware: MiddlewareFunction<Response> = async ({ url, params, context }, next) => {
  const person = requirePerson(context, url);
  const workshop = params.workshop ? await findWorkshop(database(), params.workshop, person.id) : null;
  if (!workshop) throw refusal(404, NO_SUCH_WORKSHOP);
  context.set(workshopContext, workshop);
  return next();
};

/**
 * The same for the API, where nobody can be led to the sign-in page. Every refusal leaves as Problem Details, also
 * those of React Router itself; answers that say nothing of caches belong to this person alone.
 */
export const apiWorkshopMiddleware: MiddlewareFunction<Response> = async ({ params, context }, next) => {
  const person = context.get(personContext);
  if (!person) return problemResponse(401, "Sign in first.");
  const workshop = params.workshop ? await findWorkshop(database(), params.workshop, person.id) : null;
  if (!workshop) return problemResponse(404, NO_SUCH_WORKSHOP);
  context.set(workshopContext, workshop);
  const response = await next();
  if (response.status >= 400) return asProblem(response);
  if (!response.headers.has("Cache-Control")) response.headers.set("Cache-Control", "private, no-cache");
  return response;
};

async function asProblem(response: Response): Promise<Response> {
  const contentType = response.headers.get("Content-Type") ?? "";
  if (contentType.startsWith("application/problem+json")) return response;
  const detail = contentType.startsWith("text/plain")
    ? await response.text()
    : response.status === 405
      ? "This address does not take requests of this method."
      : "This request is not understood here.";
  const answer = problemResponse(response.status, detail);
  const retryAfter = response.headers.get("Retry-After");
  if (retryAfter !== null) answer.headers.set("Retry-After", retryAfter);
  return answer;
}

/** What services are given, for the person and workshop of this request. */
export function serviceContext(context: Readonly<RouterContextProvider>): ServiceContext {
  const person = context.get(personContext);
  if (!person) throw refusal(401, "Nobody is signed in.");
  return {
    db: database(),
    person,
    workshop: context.get(workshopContext),
    appUrl: environment().APP_URL,
    now: () => new Date(),
  };
}
