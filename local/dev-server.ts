// The product with hot reload: Vite in front, and the same HTTP application behind it, loaded anew when it changes.
import { createServer } from "node:http";
import express from "express";
import type * as Server from "../app/server";
import { createServer as createViteServer, isRunnableDevEnvironment } from "vite";

type ServerModule = typeof Server;

const outer = express();
const http = createServer(outer);
// Hot reload shares the port, so that two instances don't meet on Vite's own.
const vite = await createViteServer({ server: { middlewareMode: true, hmr: { server: http } } });
const ssr = vite.environments.ssr;
if (ssr === undefined || !isRunnableDevEnvironment(ssr))
  throw new Error("Vite's server environment can't run code.");
const runner = ssr.runner;

let loaded: ServerModule | undefined;
let app: ReturnType<ServerModule["createApp"]> | undefined;
let worker: ReturnType<ServerModule["startWorker"]> | null = null;

/** The application as its files are now; the worker of an older one is stopped first. */
async function current() {
  const server: ServerModule = await runner.import("/app/server.ts");
  if (server !== loaded || app === undefined) {
    loaded = server;
    await worker?.stop();
    app = server.createApp({ clientFolder: null });
    worker = server.environment().WORKER ? server.startWorker() : null;
  }
  return app;
}

await current();
const port = Number(process.env.PORT);
outer.disable("x-powered-by");
outer.use(vite.middlewares);
outer.use(async (request, response, next) => {
  try {
    (await current())(request, response, next);
  } catch (error) {
    if (error instanceof Error) vite.ssrFixStacktrace(error);
    next(error);
  }
});
http.listen(port, "127.0.0.1", () => process.send?.({ ready: true }));

async function stop() {
  http.close();
  http.closeAllConnections();
  await worker?.stop();
  await vite.close();
  process.exit(0);
}
process.once("SIGTERM", () => void stop());
process.once("disconnect", () => void stop());
