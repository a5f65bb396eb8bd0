// Serves the built product: `node app/serve.mjs`, with the environment of app/environment.table.ts.
import { fileURLToPath } from "node:url";

process.env.NODE_ENV ??= "production";

const LONGEST_SHUTDOWN_MS = 10_000;
const buildFolder = new URL(`../${process.env.BUILD_FOLDER || "build"}/`, import.meta.url);

/** @returns {Promise<import("./server")>} */
async function load() {
  /** @type {string} */
  const built = new URL("server/index.js", buildFolder).href;
  return import(built);
}

try {
  const { createApp, environment, startWorker } = await load();
  const { PORT, HOST, WORKER } = environment();
  const app = createApp({ clientFolder: fileURLToPath(new URL("client", buildFolder)) });
  const server = app.listen(PORT, HOST, (error) => {
    if (error) {
      console.error(`Mainsgate can't listen on ${HOST}:${PORT}: ${error.message}`);
      process.exit(1);
    }
    console.log(`Mainsgate listens on ${HOST}:${PORT}.`);
    process.send?.({ ready: true });
  });
  const worker = WORKER ? startWorker() : null;

  let stopping = false;
  const stop = () => {
    if (stopping) return;
    stopping = true;
    // Answers under way are finished; whatever is not done by then starts over from the database.
    setTimeout(() => process.exit(0), LONGEST_SHUTDOWN_MS).unref();
    const closed = new Promise((resolve) => server.close(resolve));
    server.closeIdleConnections();
    void Promise.all([closed, worker?.stop()]).then(() => process.exit(0));
  };
  process.once("SIGTERM", stop);
  process.once("SIGINT", stop);
  // Started by a parent with a channel: don't outlive it.
  process.once("disconnect", stop);
} catch (error) {
  const told = error instanceof Error && error.name === "EnvironmentError" ? error.message : error;
  console.error(told);
  process.exit(1);
}
