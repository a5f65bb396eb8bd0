import { type ChildProcess, spawn } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, realpathSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { basename, join } from "node:path";
import { z } from "zod";
import { birthOf, commandLineOf, processesWithVariable } from "./processes";
import { SetupError } from "./steps.mjs";

const parts = ["typecheck", "lint", "unit", "integration", "e2e"] as const;
type Part = (typeof parts)[number];

/** Names the folder to every process of a run. */
const FOLDER_VARIABLE = "MAINSGATE_TEST_ROOT";

const reportSchema = z.object({
  numPassedTests: z.int(),
  numFailedTests: z.int(),
  numPendingTests: z.int(),
  numTodoTests: z.int(),
});

interface Outcome {
  failed: boolean;
  passedTests: number;
  failedTests: number;
  skippedTests: number;
}

/**
 * Runs the parts one after another, stops at the first that fails, and leaves nothing behind: each part's services
 * live below one temporary folder, which is swept at the end, also after a failure or Ctrl-C.
 */
export async function runTests(options: { root: string; parts: string[] }): Promise<void> {
  const chosen = choose(options.parts);
  const folder = realpathSync(mkdtempSync(join(tmpdir(), "mgt-")));
  let current: ChildProcess | undefined;
  let interrupted = false;
  for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"] as const) {
    process.on(signal, () => {
      interrupted = true;
      current?.kill(signal);
    });
  }
  const total = { passed: 0, failed: 0, skipped: 0 };
  try {
    for (const part of chosen) {
      if (interrupted) break;
      console.log(`\n=== ${part} ===`);
      const outcome = await runPart(part, options.root, folder, (child) => (current = child));
      total.passed += outcome.passedTests;
      total.skipped += outcome.skippedTests;
      // A part can fail without a failed test: a type error, a set-up that broke. It counts as one.
      total.failed += outcome.failed ? Math.max(1, outcome.failedTests) : 0;
      if (outcome.failed) break;
    }
  } finally {
    await sweep(folder);
  }
  if (interrupted) console.log("\nInterrupted: not everything was run.");
  if (total.skipped > 0) console.log(`\n${total.skipped} skipped`);
  console.log(`\n${total.passed} passed, ${total.failed} failed`);
  process.exit(interrupted || total.failed > 0 ? 1 : 0);
}

function choose(names: string[]): readonly Part[] {
  if (names.length === 0) return parts;
  const unknown = names.filter((name) => !parts.some((part) => part === name));
  if (unknown.length > 0) {
    throw new SetupError(
      `There is no part called ${unknown.join(", ")}. The parts are: ${parts.join(", ")}.`,
    );
  }
  return parts.filter((part) => names.includes(part));
}

async function runPart(
  part: Part,
  root: string,
  folder: string,
  started: (child: ChildProcess) => void,
): Promise<Outcome> {
  const report = join(folder, `${part}.json`);
  const isTests = part !== "typecheck" && part !== "lint";
  const [command, args] = isTests
    ? ["node_modules/.bin/vitest", vitestArguments(part, report)]
    : ["npm", ["run", "--silent", part]];
  const code = await new Promise<number | null>((resolve, reject) => {
    const child = spawn(command, args, {
      cwd: root,
      stdio: "inherit",
      env: { ...process.env, [FOLDER_VARIABLE]: folder, TMPDIR: folder },
    });
    started(child);
    child.once("error", reject);
    child.once("exit", resolve);
  });
  const failed = code !== 0;
  if (!isTests) return { failed, passedTests: 0, failedTests: 0, skippedTests: 0 };
  if (!existsSync(report)) return { failed: true, passedTests: 0, failedTests: 0, skippedTests: 0 };
  const counts = reportSchema.parse(JSON.parse(readFileSync(report, "utf8")));
  return {
    failed: failed || counts.numFailedTests > 0,
    passedTests: counts.numPassedTests,
    failedTests: counts.numFailedTests,
    skippedTests: counts.numPendingTests + counts.numTodoTests,
  };
}

function vitestArguments(part: string, report: string): string[] {
  return ["run", "--project", part, "--reporter=default", "--reporter=json", `--outputFile.json=${report}`];
}

/** Ends what the parts left running, and removes the folder. */
async function sweep(folder: string): Promise<void> {
  for (const pid of processesWithVariable(FOLDER_VARIABLE, folder)) {
    const birth = birthOf(pid);
    if (birth === null) continue;
    console.log(`Ending what was left over: ${basename(commandLineOf(pid)?.[0] ?? "")} (process ${pid})`);
    try {
      process.kill(pid, "SIGKILL");
    } catch {
      continue; // It ended by itself.
    }
    while (birthOf(pid) === birth) await new Promise((resolve) => setTimeout(resolve, 20));
  }
  rmSync(folder, { recursive: true, force: true, maxRetries: 5, retryDelay: 100 });
}
