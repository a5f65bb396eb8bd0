import { chmodSync, existsSync, mkdirSync, rmSync, writeFileSync } from "node:fs";
import { join, resolve as resolvePath } from "node:path";
import { buildIsCurrent, buildProduct } from "./build";
import { applyMigrations, isEmptyDatabase, recreateDatabase } from "./migrations";
import { freePort, type RunningProcess, startChild } from "./processes";
import { takeRunLock } from "./run-lock";
import { seed } from "./run-seed";
import { type BackingServices, startBackingServices } from "./services";
import { demoPeople } from "./seed/people";
import { reportFailure, SetupError, step } from "./steps.mjs";

const PREFERRED_PORT = 3000;
const PREFERRED_MAIL_PAGE_PORT = 8025;

/** "services" starts all but the product itself, and prints the environment to reach them. */
export type RunMode = "serve" | "dev" | "services";

/** Sets up and runs the product until Ctrl-C; ends the process when all that it started is stopped. */
export async function runMainsgate({ root, mode }: { root: string; mode: RunMode }): Promise<void> {
  // A second data folder lets two instances of one checkout run side by side.
  const given = process.env.MAINSGATE_DATA;
  const folder = given ? resolvePath(given) : join(root, ".data");
  const uploadsFolder = given ? join(folder, "uploads") : join(root, "uploads-local");
  const lock = takeDataFolder(folder);
  const stopRequested = new Promise<never>((_, reject) => {
    for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"] as const) {
      process.on(signal, () => reject(new StopRequested()));
    }
  });
  // Nobody may be waiting for it yet when it comes.
  stopRequested.catch(() => undefined);
  const orStop = <T>(work: Promise<T>): Promise<T> => Promise.race([work, stopRequested]);

  let services: BackingServices | undefined;
  let server: RunningProcess | undefined;
  try {
    const begin = performance.now();
    // Not cut short: what was half started could not be stopped.
    services = await startBackingServices({
      root,
      folder,
      uploadsFolder,
      ports: { mailPage: PREFERRED_MAIL_PAGE_PORT },
    });
    const port = await freePort(process.env.PORT ? Number(process.env.PORT) : PREFERRED_PORT);
    const address = `http://localhost:${port}`;
    const variables: NodeJS.ProcessEnv = {
      APP_URL: address,
      DEMO_MAIL_URL: services.mail.webAddress,
      ...services.variables,
      ...givenVariables(),
      PORT: String(port),
      NODE_ENV: mode === "dev" ? "development" : "production",
    };
    const env = { ...process.env, ...variables };
    await orStop(prepareDatabase(root, folder, services.mariadb.ownerUrl(), env));
    if (mode === "serve" && !buildIsCurrent(root, "build")) {
      await orStop(step("Build", () => buildProduct(root, "build")));
    }
    if (mode === "services") {
      lock.tellAddress("(services only)");
      for (const [name, value] of Object.entries(variables)) console.log(`${name}='${value}'`);
      await stopRequested;
    }
    server = await step(
      "Start the server",
      () => serve(root, env, mode === "dev"),
      () => address,
    );
    lock.tellAddress(address);
    console.log(`  Ready after ${((performance.now() - begin) / 1000).toFixed(1)} s\n`);
    printWelcome(address, services.mail.webAddress);
    const how = await orStop(server.exited);
    throw new SetupError(`The server ended by itself (${how}). Everything else stops too.`);
  } catch (error) {
    if (error instanceof StopRequested) console.log("\nStopping");
    else reportFailure(error);
  } finally {
    if (server !== undefined) await step("Stop the server", () => server?.stop());
    if (services !== undefined) await step("Stop mail, S3 and MariaDB", () => services?.stop());
    lock.release();
  }
  process.exit();
}

class StopRequested extends Error {}

/**
 * Applies the migrations, and puts the demo into a database in which nobody has worked yet. A note in the data
 * folder tells a demo that was cut off half-way: it is then started over.
 */
async function prepareDatabase(
  root: string,
  folder: string,
  ownerUrl: string,
  env: NodeJS.ProcessEnv,
): Promise<void> {
  const halfSeeded = join(folder, "demo-is-being-put-in");
  if (existsSync(halfSeeded)) await step("Clear a half-made demo", () => recreateDatabase(ownerUrl));
  await step(
    "Apply migrations",
    () => applyMigrations(root, ownerUrl),
    (count) => `${count} new`,
  );
  if (await isEmptyDatabase(ownerUrl)) {
    writeFileSync(halfSeeded, "");
    await step("Put in the demo workshop", () => seed(root, env));
  }
  rmSync(halfSeeded, { force: true });
}

function takeDataFolder(folder: string) {
  try {
    mkdirSync(folder, { recursive: true });
    chmodSync(folder, 0o700);
    const lock = takeRunLock(folder);
    if (lock.taken) return lock;
    const where = lock.holder.address === null ? "is starting" : `runs at ${lock.holder.address}`;
    throw new SetupError(
      `Mainsgate already ${where} (process ${lock.holder.pid}). Stop that one first with Ctrl-C.`,
    );
  } catch (error) {
    if (error instanceof Error && "code" in error && (error.code === "EACCES" || error.code === "EPERM")) {
      throw new SetupError(
        `The folder ${folder} belongs to another user, who started Mainsgate here before.`,
      );
    }
    throw error;
  }
}

/** Variables that the person set by hand, such as APP_URL behind a proxy, go before the local ones. */
function givenVariables(): Record<string, string> {
  const names = ["APP_URL", "HOST", "TRUST_PROXY", "CHANGES_PER_MINUTE", "SMTP_URL", "MAIL_FROM"];
  return Object.fromEntries(names.flatMap((name) => (process.env[name] ? [[name, process.env[name]]] : [])));
}

async function serve(root: string, env: NodeJS.ProcessEnv, dev: boolean): Promise<RunningProcess> {
  const { process: child } = await startChild({
    name: "The server",
    script: join(root, dev ? "local/dev-server.ts" : "app/serve.mjs"),
    typescript: dev,
    cwd: root,
    env,
  });
  return child;
}

function printWelcome(address: string, mailAddress: string): void {
  console.log(`Mainsgate        ${address}`);
  console.log(`Outgoing mail    ${mailAddress}\n`);
  console.log("Demo people (all invented) to sign in as:");
  for (const { name, email, password, roles } of demoPeople) {
    console.log(`  ${email.padEnd(22)} ${password.padEnd(20)} ${name} (${roles.join(", ")})`);
  }
  console.log("\nCtrl-C stops everything.");
}
