import { createCookie, type MiddlewareFunction, redirect, type RouterContextProvider } from "react-router";
import { clientAddressContext, personContext, type SignedInPerson } from "~/context";
import { environment } from "~/environment.server";
import { database } from "~/services/database.server";
import {
  findSession,
  hashSecret,
  openSession,
  revokeSession,
  sweepSessions,
} from "~/services/people/sessions.server";
import { sweepTries } from "~/services/people/throttle.server";

type Context = Readonly<RouterContextProvider>;

function sessionCookie() {
  const { APP_URL, SESSION_SECRET } = environment();
  const secure = APP_URL.startsWith("https:");
  return createCookie(secure ? "__Host-mainsgate" : "mainsgate", {
    httpOnly: true,
    sameSite: "lax",
    path: "/",
    secure,
    maxAge: 14 * 86_400,
    secrets: [SESSION_SECRET],
  });
}

async function readSecret(request: Request): Promise<string | null> {
  const value: unknown = await sessionCookie().parse(request.headers.get("Cookie"));
  return typeof value === "string" && value.length > 0 ? value : null;
}

/** Finds out, once a request, who is signed in. */
export const sessionMiddleware: MiddlewareFunction<Response> = async ({ request, context }, next) => {
  const secret = await readSecret(request);
  const session = secret ? await findSession(database(), secret, new Date()) : null;
  context.set(personContext, session?.person ?? null);
  const response = await next();
  if (secret && session?.renewed && !setsSession(response) && !isForEverybody(response)) {
    // The browser forgets the cookie when the session would have ended without this visit.
    response.headers.append("Set-Cookie", await sessionCookie().serialize(secret));
  }
  return response;
};

/** Whether an answer signs in or out by itself. */
function setsSession(response: Response): boolean {
  const { name } = sessionCookie();
  return response.headers.getSetCookie().some((cookie) => cookie.startsWith(`${name}=`));
}

/** Whether shared caches may keep an answer: it must hold nobody's cookie. */
function isForEverybody(response: Response): boolean {
  return response.headers.get("Cache-Control")?.includes("public") ?? false;
}

/** The signed-in person, or a redirect to the sign-in page that leads back here afterwards. */
export function requirePerson(context: Context, url: URL): SignedInPerson {
  const person = context.get(personContext);
  if (person) return person;
  const back =
    url.pathname === "/" ? "" : `?${new URLSearchParams({ to: url.pathname + url.search }).toString()}`;
  throw redirect(`/sign-in${back}`);
}

/** Opens a session for a person who has just authenticated; the header sets its cookie. */
export async function signIn(request: Request, context: Context, personId: number): Promise<string> {
  const origin = {
    userAgent: request.headers.get("User-Agent") ?? "",
    ip: context.get(clientAddressContext),
  };
  const now = new Date();
  await Promise.all([sweepSessions(database(), now), sweepTries(database(), now)]);
  const secret = await openSession(database(), personId, origin, now);
  return sessionCookie().serialize(secret);
}

/** Ends the session of this request; the header removes its cookie. */
export async function signOut(request: Request, context: Context): Promise<string> {
  const secret = await readSecret(request);
  const person = context.get(personContext);
  if (secret && person) await revokeSession(database(), person.id, hashSecret(secret));
  return sessionCookie().serialize("", { maxAge: 0 });
}

/** The hash that names this request's own session in the list of sessions. */
export async function currentSessionHash(request: Request): Promise<string | null> {
  const secret = await readSecret(request);
  return secret ? hashSecret(secret) : null;
}
