import { randomBytes, randomUUID } from "node:crypto";
import { join } from "node:path";
import { createRequestHandler } from "@react-router/express";
import compression from "compression";
import express, { type ErrorRequestHandler, type Express, type RequestHandler } from "express";
import { RouterContextProvider } from "react-router";
import * as build from "virtual:react-router/server-build";
import { clientAddressContext, cspNonceContext, requestIdContext } from "~/context";
import { environment } from "~/environment.server";
import { refusalByBody } from "~/http/body-limit";
import { createChangeLimit } from "~/http/change-limit";
import { databaseAnswers, waitForDatabase } from "~/http/database-gate.server";
import { refusalByOrigin } from "~/http/origin-check";
import { answerPlainly } from "~/http/plain-answers";
import { securityHeaders } from "~/http/security-headers";
import { network } from "~/services/people/throttle.server";

export { environment };
export { startWorker } from "~/services/jobs/worker.server";

/** How long a request waits for MariaDB to come back before it is told that it can't be served. */
const DATABASE_PATIENCE_MS = 5_000;
const DATABASE_AWAY =
  "The database does not answer just now. Nothing was changed; please try again in a moment.";

declare global {
  // Express keeps what middleware hands on in this global interface.
  // eslint-disable-next-line @typescript-eslint/no-namespace
  namespace Express {
    interface Locals {
      requestId: string;
      nonce: string;
    }
  }
}

/**
 * The HTTP application: what stands in front of React Router, and React Router itself.
 * @param options.clientFolder the built client files, or null while Vite serves them
 */
export function createApp(options: { clientFolder: string | null }): Express {
  const { TRUST_PROXY, CHANGES_PER_MINUTE } = environment();
  const app = express();
  app.disable("x-powered-by");
  app.set("trust proxy", TRUST_PROXY);
  app.use(introduce(options.clientFolder === null));
  app.use(compression());
  if (options.clientFolder !== null) serveFiles(app, options.clientFolder);
  app.get("/healthz", async (_request, response) => {
    const answers = await databaseAnswers();
    response.status(answers ? 200 : 503).set("Cache-Control", "no-store");
    response.json({
      status: answers ? "ok" : "unavailable",
      database: answers ? "answers" : "does not answer",
    });
  });
  app.use(checkOrigin);
  app.use(checkBody);
  app.use(limitChanges(CHANGES_PER_MINUTE));
  app.use(requireDatabase);
  app.use(pages());
  app.use(reportError);
  return app;
}

/** Gives the request its id and nonce, and the answer its security headers. */
function introduce(dev: boolean): RequestHandler {
  const publicHttps = environment().APP_URL.startsWith("https:");
  return (request, response, next) => {
    response.locals.requestId = randomUUID();
    response.locals.nonce = randomBytes(16).toString("base64");
    response.set("X-Request-Id", response.locals.requestId);
    response.set(
      securityHeaders({ nonce: response.locals.nonce, https: publicHttps || request.secure, dev }),
    );
    next();
  };
}

/** Built files carry their hash in the name, so a browser may keep them for good; the rest of public/ for an hour. */
function serveFiles(app: Express, clientFolder: string): void {
  app.use(
    "/assets",
    express.static(join(clientFolder, "assets"), { immutable: true, maxAge: "1y", index: false }),
  );
  app.use("/assets", (_request, response) => {
    response.status(404).type("text/plain").send("There is no such file.");
  });
  app.use(express.static(clientFolder, { maxAge: "1h", index: false }));
}

const checkOrigin: RequestHandler = (request, response, next) => {
  const host = request.get("Host") ?? "";
  const refusal = refusalByOrigin({
    method: request.method,
    secFetchSite: request.get("Sec-Fetch-Site") ?? null,
    origin: request.get("Origin") ?? null,
    ownOrigins: [new URL(environment().APP_URL).origin, `${request.protocol}://${host}`],
  });
  if (refusal === null) next();
  else answerPlainly(request, response, 403, refusal);
};

const checkBody: RequestHandler = (request, response, next) => {
  if (request.method === "GET" || request.method === "HEAD") return next();
  const refusal = refusalByBody({
    path: request.path,
    contentLength: request.get("Content-Length") ?? null,
    transferEncoding: request.get("Transfer-Encoding") ?? null,
  });
  if (refusal === null) next();
  else answerPlainly(request, response, refusal.status, refusal.detail);
};

function limitChanges(perMinute: number): RequestHandler {
  const count = createChangeLimit(perMinute);
  return (request, response, next) => {
    if (request.method === "GET" || request.method === "HEAD") return next();
    const wait = count(network(request.ip ?? ""), Date.now());
    if (wait === null) return next();
    response.set("Retry-After", String(wait));
    answerPlainly(
      request,
      response,
      429,
      `Too many requests from your address. Please wait ${wait} seconds.`,
    );
  };
}

const requireDatabase: RequestHandler = async (request, response, next) => {
  if (await waitForDatabase(DATABASE_PATIENCE_MS)) return next();
  response.set("Retry-After", "5");
  answerPlainly(request, response, 503, DATABASE_AWAY);
};

function pages(): RequestHandler {
  // React Router compares a form's origin with the Host header, which a proxy may have changed: name the public one.
  const allowedActionOrigins = [...(build.allowedActionOrigins || []), new URL(environment().APP_URL).host];
  return createRequestHandler({
    build: { ...build, allowedActionOrigins },
    mode: import.meta.env.PROD ? "production" : "development",
    getLoadContext(request, response) {
      const context = new RouterContextProvider();
      context.set(requestIdContext, response.locals.requestId);
      context.set(cspNonceContext, response.locals.nonce);
      context.set(clientAddressContext, request.ip ?? "");
      return context;
    },
  });
}

/** The last resort: React Router has answered errors of pages already. */
const reportError: ErrorRequestHandler = (error: unknown, request, response, next) => {
  console.error(`[${response.locals.requestId}] ${request.method} ${request.path}`, error);
  if (response.headersSent) return next(error);
  answerPlainly(
    request,
    response,
    500,
    `Please try again. If it happens again, tell your steward this number: ${response.locals.requestId}`,
  );
};
