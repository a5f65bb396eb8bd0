import { PassThrough } from "node:stream";
import { createReadableStreamFromReadable } from "@react-router/node";
import { isbot } from "isbot";
import { renderToPipeableStream } from "react-dom/server";
import {
  type EntryContext,
  type HandleDataRequestFunction,
  type HandleErrorFunction,
  isRouteErrorResponse,
  type RouterContextProvider,
  ServerRouter,
} from "react-router";
import { cspNonceContext, requestIdContext } from "~/context";
import { doubtDatabase, isDatabaseAway } from "~/http/database-gate.server";
import { plainPage } from "~/http/plain-answers";

/** After this, what a page still waits for is given up. */
export const streamTimeout = 5_000;

/** Requests in which a query failed because MariaDB went away. */
const cutOff = new WeakSet<object>();

export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  routerContext: EntryContext,
  loadContext: RouterContextProvider,
): Promise<Response> | Response {
  keepPrivate(headers);
  headers.set("Content-Type", "text/html; charset=utf-8");
  if (cutOff.has(loadContext)) {
    headers.set("Retry-After", "5");
    const detail =
      "The database stopped answering. Please try again in a moment; look first whether it was done.";
    return new Response(plainPage("Not available just now", detail), { status: 503, headers });
  }
  if (request.method === "HEAD") return new Response(null, { status, headers });

  const nonce = loadContext.get(cspNonceContext);
  const ready = isbot(request.headers.get("User-Agent") ?? "") ? "onAllReady" : "onShellReady";
  return new Promise((resolve, reject) => {
    let shellSent = false;
    let answerStatus = status;
    const { pipe, abort } = renderToPipeableStream(
      <ServerRouter context={routerContext} url={request.url} nonce={nonce} />,
      {
        nonce,
        [ready]() {
          shellSent = true;
          const body = new PassThrough({
            final(done) {
              clearTimeout(timer);
              done();
            },
          });
          resolve(new Response(createReadableStreamFromReadable(body), { headers, status: answerStatus }));
          pipe(body);
        },
        onShellError: reject,
        onError(error: unknown) {
          answerStatus = 500;
          // Errors before the shell reject, and are logged there.
          if (shellSent) console.error(`[${loadContext.get(requestIdContext)}] while rendering:`, error);
        },
      },
    );
    const timer = setTimeout(abort, streamTimeout + 1_000);
  });
}

export const handleDataRequest: HandleDataRequestFunction = (response) => {
  keepPrivate(response.headers);
  return response;
};

export const handleError: HandleErrorFunction = (error, { request, context }) => {
  if (isDatabaseAway(error)) {
    doubtDatabase();
    cutOff.add(context);
  }
  if (request.signal.aborted || isRouteErrorResponse(error)) return;
  const id = context.get(requestIdContext);
  console.error(`[${id}] ${request.method} ${withoutSecrets(new URL(request.url).pathname)}`, error);
};

/** Pages hold a workshop's data: no shared cache may keep them, and a browser asks again. */
function keepPrivate(headers: Headers): void {
  if (!headers.has("Cache-Control")) headers.set("Cache-Control", "private, no-cache");
}

/** Long segments may be the tokens of invitations and resets, which must not reach a log. */
function withoutSecrets(path: string): string {
  return path.replace(/[^/]{24,}/g, "…");
}
