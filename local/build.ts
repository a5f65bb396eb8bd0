import { spawn } from "node:child_process";
import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from "node:fs";
import { join, relative } from "node:path";
import { SetupError } from "./steps.mjs";

/** What a build is made from. */
const SOURCES = [
  "app",
  "public",
  "package-lock.json",
  "react-router.config.ts",
  "tsconfig.json",
  "vite.config.ts",
];

/** The product's build, and the tests' own: rebuilding must not pull files from under a running server. */
export type BuildFolder = "build" | ".data/build-for-tests";

/** Whether the folder was built from the files as they are now. */
export function buildIsCurrent(root: string, folder: BuildFolder): boolean {
  const stamp = stampFile(root, folder);
  return existsSync(stamp) && readFileSync(stamp, "utf8") === sourceHash(root);
}

/** Builds client and server for production. The stamp is written last, so that a broken build is never current. */
export async function buildProduct(root: string, folder: BuildFolder): Promise<void> {
  const hash = sourceHash(root);
  const output = await runToEnd(join(root, "node_modules/.bin/react-router"), ["build"], root, {
    NODE_ENV: "production",
    BUILD_FOLDER: folder,
  });
  if (output.failed) throw new SetupError(`The build failed:\n${output.text.slice(-6000)}`);
  writeFileSync(stampFile(root, folder), hash);
}

function stampFile(root: string, folder: BuildFolder): string {
  return join(root, folder, "made-from");
}

/** A hash over the content of all sources: times of files tell little after a checkout. */
export function sourceHash(root: string): string {
  const hash = createHash("sha256");
  for (const source of SOURCES) {
    for (const file of filesBelow(root, source)) {
      hash
        .update(`${file}\0`)
        .update(readFileSync(join(root, file)))
        .update("\0");
    }
  }
  return hash.digest("hex");
}

/** The files of a folder, or the file itself, as paths from the root in a fixed order; none when it is not there. */
function filesBelow(root: string, path: string): string[] {
  const full = join(root, path);
  if (!existsSync(full)) return [];
  if (statSync(full).isFile()) return [path];
  return readdirSync(full, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && !/\.test\.tsx?$/.test(entry.name))
    .map((entry) => relative(root, join(entry.parentPath, entry.name)))
    .sort();
}

function runToEnd(
  command: string,
  args: string[],
  cwd: string,
  variables: NodeJS.ProcessEnv,
): Promise<{ failed: boolean; text: string }> {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd, env: { ...process.env, ...variables } });
    // A build must not go on by itself and change the folder under the next start.
    const end = () => child.kill();
    process.once("exit", end);
    child.once("exit", () => process.off("exit", end));
    let text = "";
    child.stdout.on("data", (chunk) => (text += chunk));
    child.stderr.on("data", (chunk) => (text += chunk));
    child.once("error", reject);
    child.once("close", (code) => resolve({ failed: code !== 0, text }));
  });
}
