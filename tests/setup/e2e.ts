import { cpSync } from "node:fs";
import { join } from "node:path";
import type { TestProject } from "vitest/node";
import { buildIsCurrent, buildProduct } from "../../local/build";
import { applyMigrations } from "../../local/migrations";
import { seed } from "../../local/run-seed";
import { startBackingServices } from "../../local/services";
import { makeTestFolder, root } from "./test-folder";

declare module "vitest" {
  interface ProvidedContext {
    templates: Templates;
  }
}

/** Data folders to copy from: migrated and empty, and with the demo workshop in it. */
export interface Templates {
  folder: string;
  empty: string;
  demo: string;
}

/** Builds the product when it must, and makes the data folders that each test's server starts from. */
export default async function setup(project: TestProject): Promise<() => void> {
  if (!buildIsCurrent(root, ".data/build-for-tests")) await buildProduct(root, ".data/build-for-tests");
  const { folder, remove } = makeTestFolder("e2e");
  const templates: Templates = { folder, empty: join(folder, "empty"), demo: join(folder, "demo") };

  const empty = await start(templates.empty);
  await applyMigrations(root, empty.mariadb.ownerUrl());
  await empty.stop();

  cpSync(templates.empty, templates.demo, { recursive: true });
  const demo = await start(templates.demo);
  try {
    // The demo's own address does not matter: links are made when mail is sent.
    await seed(root, {
      ...process.env,
      ...demo.variables,
      APP_URL: "http://localhost",
      NODE_ENV: "production",
    });
  } finally {
    await demo.stop();
  }
  project.provide("templates", templates);
  return remove;
}

function start(folder: string) {
  return startBackingServices({
    root,
    folder,
    uploadsFolder: join(folder, "uploads"),
    throwAway: true,
    quiet: true,
  });
}
