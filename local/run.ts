import { mkdirSync } from "node:fs";
import { join, resolve as resolvePath } from "node:path";
import { buildIsCurrent, buildProduct } from "./build";
import { applyMigrations, isEmptyDatabase } from "./migrations";
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
  const stopping = new Promise<string>((resolve) => {
    for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"] as const) process.on(signal, () => resolve(signal));
  });
  let services: BackingServices | undefined;
  let server: RunningProcess | undefined;
  try {
    const begin = performance.now();
    services = await startBackingServices({
      root,
      folder,
      uploadsFolder,
      ports: { mailPage: PREFERRED_MAIL_PAGE_PORT },
    });
    const ownerUrl = services.mariadb.ownerUrl();
    await step(
      "Apply migrations",
      () => applyMigrations(root, ownerUrl),
      (count) => `${count} new`,
    );

    const port = await freePort(process.env.PORT ? Number(process.env.PORT) : PREFERRED_PORT);
    const address = `http://localhost:${port}`;
    const env: NodeJS.ProcessEnv = {
      APP_URL: address,
      DEMO_MAIL_URL: services.mail.webAddress,
      ...services.variables,
      ...givenVariables(),
      PORT: String(port),
      NODE_ENV: mode === "dev" ? "development" : "production",
    };
    const childEnv = { ...process.env, ...env };
    if (await isEmptyDatabase(ownerUrl)) await step("Put in the demo workshop", () => seed(root, childEnv));
    if (mode === "serve" && !buildIsCurrent(root, "build"))
      await step("Build", () => buildProduct(root, "build"));
    if (mode === "services") {
      lock.tellAddress("(services only)");
      console.log(
        `\n${Object.entries(env)
          .map(([name, value]) => `${name}='${value}'`)
          .join("\n")}\n`,
      );
    } else {
      server = await step(
        "Start the server",
        () => serve(root, childEnv, mode === "dev"),
        () => address,
      );
      lock.tellAddress(address);
      console.log(`  Ready after ${((performance.now() - begin) / 1000).toFixed(1)} s\n`);
      printWelcome(address, services.mail.webAddress);
    }
    const ended = server?.exited.then((how) => ({ how }));
    const why = await (ended ? Promise.race([stopping, ended]) : stopping);
    if (typeof why !== "string")
      throw new SetupError(`The server ended by itself (${why.how}). Everything else stops too.`);
    console.log("\nStopping");
  } catch (error) {
    reportFailure(error);
  } finally {
    if (server !== undefined) await step("Stop the server", () => server?.stop());
    if (services !== undefined) await step("Stop mail, S3 and MariaDB", () => services?.stop());
    lock.release();
  }
  process.exit();
}

function takeDataFolder(folder: string) {
  try {
    mkdirSync(folder, { recursive: true, mode: 0o700 });
    const lock = takeRunLock(folder);
    if (lock.taken) return lock;
    const where = lock.holder.address === null ? "is starting" : `runs at ${lock.holder.address}`;
    throw new SetupError(
      `Mainsgate already ${where} (process ${lock.holder.pid}). Stop that one first with Ctrl-C.`,
    );
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "EACCES") {
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
