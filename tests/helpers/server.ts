import { cpSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, inject } from "vitest";
import { readMessages } from "../../local/mail-server";
import type { ReadMessage } from "../../local/mail-pages";
import { freePort, type RunningProcess, startChild } from "../../local/processes";
import { type BackingServices, startBackingServices } from "../../local/services";
import { ownerQuery } from "./database";

export interface TestServer {
  /** Where the product runs, e.g. http://localhost:41234. The same after a restart. */
  readonly address: string;
  /** MariaDB, S3 and mail: each can be stopped and started again on its port. */
  readonly services: BackingServices;
  /** Ends the application cleanly. */
  stopApp(): Promise<void>;
  /** Ends the application as a crash would. */
  killApp(): Promise<void>;
  startApp(): Promise<void>;
  /** Mail kept so far, newest first. */
  messages(): Promise<ReadMessage[]>;
  /** A statement as the database's owner. */
  query(sql: string, values?: unknown[]): ReturnType<typeof ownerQuery>;
  /** What the application printed. */
  log(): string;
  stop(): Promise<void>;
}

export interface TestServerOptions {
  /** "demo" holds the demo workshop, "empty" only the tables. */
  data: "demo" | "empty";
  /** Variables to change, e.g. { WORKER: "false" }. */
  variables?: Record<string, string>;
}

/** Starts the built application on a MariaDB, S3 and mail server of its own. */
export async function startServer(options: TestServerOptions): Promise<TestServer> {
  const root = process.cwd();
  const templates = inject("templates");
  const folder = mkdtempSync(join(templates.folder, "run-"));
  cpSync(templates[options.data], folder, { recursive: true });
  const services = await startBackingServices({
    root,
    folder,
    uploadsFolder: join(folder, "uploads"),
    throwAway: true,
    quiet: true,
  });
  const port = await freePort();
  const address = `http://localhost:${port}`;
  const logFile = join(folder, "app.log");
  let app: RunningProcess | undefined;
  const startApp = async () => {
    const { process: started } = await startChild({
      name: "The server",
      script: join(root, "app/serve.mjs"),
      typescript: false,
      cwd: root,
      logFile,
      env: {
        ...process.env,
        ...services.variables,
        APP_URL: address,
        PORT: String(port),
        HOST: "127.0.0.1",
        NODE_ENV: "production",
        BUILD_FOLDER: ".data/build-for-tests",
        ...options.variables,
      },
    });
    app = started;
  };
  try {
    await startApp();
  } catch (error) {
    await services.stop();
    throw error;
  }
  return {
    address,
    services,
    startApp,
    stopApp: async () => app?.stop(),
    killApp: async () => app?.kill(),
    messages: () => readMessages(services.mail.folder),
    query: (sql, values) => ownerQuery(services.mariadb.ownerUrl(), sql, values),
    log: () => readFileSync(logFile, "utf8"),
    async stop() {
      await app?.stop();
      await services.stop();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

/**
 * One server for all tests of a file, started before the first and stopped after the last. Call it at the top of
 * the file; the function it returns gives the server once a test runs.
 */
export function useServer(options: TestServerOptions): () => TestServer {
  let server: TestServer | undefined;
  beforeAll(async () => {
    server = await startServer(options);
  });
  afterAll(async () => {
    await server?.stop();
  });
  return () => {
    if (server === undefined) throw new Error("The server starts in beforeAll: ask for it inside a test.");
    return server;
  };
}
