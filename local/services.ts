import { mkdirSync } from "node:fs";
import { join } from "node:path";
import type { FakeInput } from "./fake-process";
import { type MariaDb, startMariaDb } from "./mariadb";
import { freePort, type RunningProcess, startChild } from "./processes";
import { keepSecrets } from "./secrets";
import { step } from "./steps.mjs";

/** A local service that can be taken away and brought back on the same port, as an accident would. */
export interface Fake {
  stop(): Promise<void>;
  startAgain(): Promise<void>;
}

export interface BackingServices {
  mariadb: MariaDb;
  objectStore: Fake;
  mail: Fake & { readonly folder: string; readonly webAddress: string };
  /** What the application needs to reach all three: rows of its environment table. */
  variables: Record<string, string>;
  /** Ends all three, the database last. */
  stop(): Promise<void>;
}

export interface BackingServicesOptions {
  root: string;
  /** Holds the database, the mail, the secrets and the logs. */
  folder: string;
  /** Holds the objects of the local S3. */
  uploadsFolder: string;
  ports?: { database?: number; mailPage?: number };
  throwAway?: boolean;
  /** Says nothing while starting. */
  quiet?: boolean;
}

const REGION = "local-1";
const BUCKET = "mainsgate";

/** Starts MariaDB and the local S3 and SMTP servers on a data folder. When one fails, the others are stopped again. */
export async function startBackingServices(options: BackingServicesOptions): Promise<BackingServices> {
  const { folder } = options;
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  const secrets = keepSecrets(folder);
  const started: { stop(): Promise<void> }[] = [];
  const stop = async () => {
    for (const service of started.splice(0).reverse()) await service.stop();
  };
  const tell = options.quiet
    ? async <T>(_what: string, work: () => Promise<T>, _note?: (result: T) => string) => work()
    : step;
  const say = async <T extends { stop(): Promise<void> }>(
    what: string,
    work: () => Promise<T>,
    note: (result: T) => string,
  ) => {
    const result = await tell(what, work, note);
    started.push(result);
    return result;
  };

  try {
    const mariadb = await say(
      "Start MariaDB",
      () =>
        startMariaDb({
          folder,
          passwords: secrets,
          port: options.ports?.database,
          throwAway: options.throwAway,
        }),
      (database) => `127.0.0.1:${database.port}`,
    );
    const s3Port = await freePort();
    const objectStore = await say(
      "Start the local S3",
      () =>
        startFake(options.root, folder, {
          kind: "object-store",
          folder: options.uploadsFolder,
          bucket: BUCKET,
          port: s3Port,
          region: REGION,
          accessKeyId: secrets.s3AccessKeyId,
          secretAccessKey: secrets.s3SecretAccessKey,
        }),
      () => `127.0.0.1:${s3Port}`,
    );
    const smtpPort = await freePort();
    const webPort = await freePort(options.ports?.mailPage);
    const mailFolder = join(folder, "mail");
    const mail = await say(
      "Start the local mail server",
      () => startFake(options.root, folder, { kind: "mail", folder: mailFolder, smtpPort, webPort }),
      () => `127.0.0.1:${smtpPort}`,
    );
    return {
      mariadb,
      objectStore,
      mail: { ...mail, folder: mailFolder, webAddress: `http://127.0.0.1:${webPort}` },
      variables: {
        DATABASE_URL: mariadb.appUrl(),
        S3_ENDPOINT: `http://127.0.0.1:${s3Port}`,
        S3_REGION: REGION,
        S3_BUCKET: BUCKET,
        S3_ACCESS_KEY_ID: secrets.s3AccessKeyId,
        S3_SECRET_ACCESS_KEY: secrets.s3SecretAccessKey,
        SMTP_URL: `smtp://127.0.0.1:${smtpPort}`,
        MAIL_FROM: "Mainsgate demo <mainsgate@demo.example>",
        SESSION_SECRET: secrets.session,
      },
      stop,
    };
  } catch (error) {
    await stop();
    throw error;
  }
}

async function startFake(root: string, folder: string, input: FakeInput): Promise<Fake> {
  const launch = async (): Promise<RunningProcess> =>
    (
      await startChild({
        name: input.kind,
        script: join(root, "local/fake-process.ts"),
        cwd: root,
        logFile: join(folder, `${input.kind}.log`),
        input,
      })
    ).process;
  let current = await launch();
  return {
    stop: () => current.stop(),
    async startAgain() {
      await current.stop();
      current = await launch();
    },
  };
}
