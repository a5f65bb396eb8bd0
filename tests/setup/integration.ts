import { join } from "node:path";
import type { TestProject } from "vitest/node";
import { startBackingServices } from "../../local/services";
import { makeTestFolder, root } from "./test-folder";

declare module "vitest" {
  interface ProvidedContext {
    services: IntegrationServices;
  }
}

/** What integration tests need to reach the services that run for all of them. */
export interface IntegrationServices {
  /** The environment's variables; DATABASE_URL names a database that no test uses. */
  variables: Record<string, string>;
  /** The owner's connection, to make a database for each test file. */
  ownerUrl: string;
  mailFolder: string;
}

/** One MariaDB, S3 and mail server for the whole run. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { folder, remove } = makeTestFolder("int");
  const services = await startBackingServices({
    root,
    folder,
    uploadsFolder: join(folder, "uploads"),
    throwAway: true,
    quiet: true,
  });
  project.provide("services", {
    variables: services.variables,
    ownerUrl: services.mariadb.ownerUrl(),
    mailFolder: services.mail.folder,
  });
  return async () => {
    await services.stop();
    remove();
  };
}
