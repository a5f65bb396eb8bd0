import { type ChildProcess, spawn } from "node:child_process";
import { randomInt } from "node:crypto";
import { closeSync, existsSync, openSync, readdirSync, readFileSync } from "node:fs";
import { createServer } from "node:net";
import { SetupError } from "./steps.mjs";

/** A process that we started, and that we alone stop. */
export interface RunningProcess {
  readonly name: string;
  readonly pid: number;
  /** Ends with the exit status or signal; never rejects. */
  readonly exited: Promise<string>;
  /** Asks it to end (SIGTERM unless told), and after `patienceMs` makes it end. Safe to call twice. */
  stop(options?: { signal?: NodeJS.Signals; patienceMs?: number }): Promise<void>;
  /** Ends it at once, as a crash would. */
  kill(): Promise<void>;
}

export interface StartOptions {
  name: string;
  command: string;
  args: readonly string[];
  /** What it prints goes to this file, or to our own output when absent. */
  logFile?: string;
  env?: NodeJS.ProcessEnv;
  cwd?: string;
  /** Opens an IPC channel: the child tells through it when it is ready, and ends when the channel breaks. */
  channel?: boolean;
}

/**
 * Starts a process in a group of its own, so that Ctrl-C in the terminal reaches us alone and we stop everything
 * in order.
 */
export function startProcess(options: StartOptions): RunningProcess & { child: ChildProcess } {
  const log = options.logFile === undefined ? null : openSync(options.logFile, "a", 0o600);
  const out = log ?? "inherit";
  const child = spawn(options.command, [...options.args], {
    cwd: options.cwd,
    env: options.env ?? process.env,
    detached: true,
    stdio: options.channel ? ["ignore", out, out, "ipc"] : ["ignore", out, out],
  });
  if (log !== null) closeSync(log);
  const exited = new Promise<string>((resolve) => {
    child.once("exit", (code, signal) => resolve(signal ?? `status ${code}`));
    child.once("error", (error) => resolve(error.message));
  });
  const isOver = () => child.exitCode !== null || child.signalCode !== null || child.pid === undefined;
  return {
    name: options.name,
    pid: child.pid ?? -1,
    child,
    exited,
    async stop({ signal = "SIGTERM", patienceMs = 15_000 } = {}) {
      if (isOver()) return;
      child.kill(signal);
      const timer = setTimeout(() => child.kill("SIGKILL"), patienceMs);
      await exited;
      clearTimeout(timer);
    },
    async kill() {
      if (isOver()) return;
      child.kill("SIGKILL");
      await exited;
    },
  };
}

/**
 * Starts a TypeScript file of ours as a child and waits until it says `{ ready: … }` over the channel.
 * @returns the process and what it said
 */
export async function startChild<Ready>(
  options: Omit<StartOptions, "command" | "args" | "channel"> & {
    script: string;
    input?: unknown;
    typescript?: boolean;
  },
): Promise<{ process: RunningProcess & { child: ChildProcess }; ready: Ready }> {
  const loader = options.typescript === false ? [] : ["--import", "tsx"];
  const started = startProcess({
    ...options,
    command: process.execPath,
    args: [...loader, options.script],
    // Not an argument: those can be read by every user of the machine.
    env: { ...(options.env ?? process.env), CHILD_INPUT: JSON.stringify(options.input ?? null) },
    channel: true,
  });
  const ready = await new Promise<Ready>((resolve, reject) => {
    started.child.on("message", (message: { ready?: Ready }) => {
      if (message.ready !== undefined) resolve(message.ready);
    });
    void started.exited.then((how) =>
      reject(new SetupError(`${options.name} ended while starting (${how}).${lastLines(options.logFile)}`)),
    );
  });
  return { process: started, ready };
}

/** The end of a log, indented, to show why something did not start. */
export function lastLines(file: string | undefined, count = 12): string {
  if (file === undefined || !existsSync(file)) return "";
  const lines = readFileSync(file, "utf8").trimEnd().split("\n").slice(-count);
  return `\n${lines.map((line) => `    ${line}`).join("\n")}`;
}

/**
 * A port that is free on the loopback now: `preferred` when it can be had. Others are taken from below the range that
 * the kernel gives to outgoing connections (from 32768): there, a client that tries to reach a service which is
 * stopped for a moment could be given the service's own port.
 */
export async function freePort(preferred?: number): Promise<number> {
  if (preferred !== undefined && (await isFree(preferred))) return preferred;
  for (let tries = 0; tries < 200; tries++) {
    const port = randomInt(20_000, 32_768);
    if (await isFree(port)) return port;
  }
  throw new SetupError("No free port was found on 127.0.0.1.");
}

function isFree(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const server = createServer();
    server.once("error", () => resolve(false));
    server.listen(port, "127.0.0.1", () => server.close(() => resolve(true)));
  });
}

/** The arguments of a running process, or null when it is gone (or is a zombie). */
export function commandLineOf(pid: number): string[] | null {
  try {
    const parts = readFileSync(`/proc/${pid}/cmdline`, "utf8").split("\0").filter(Boolean);
    return parts.length === 0 ? null : parts;
  } catch {
    return null;
  }
}

/** When a process began, in the kernel's clock ticks: tells a reused process number from the one that we knew. */
export function birthOf(pid: number): string | null {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
    // Field 22; the name in parentheses (field 2) may hold spaces.
    const fields = stat.slice(stat.lastIndexOf(")") + 2).split(" ");
    return fields[0] === "Z" ? null : (fields[19] ?? null);
  } catch {
    return null;
  }
}

/** Processes one of whose arguments is exactly `argument`. */
export function processesWithArgument(argument: string): number[] {
  return otherProcesses().filter((pid) => commandLineOf(pid)?.includes(argument));
}

/** Processes that were started with this variable in their environment, such as all descendants of a test run. */
export function processesWithVariable(name: string, value: string): number[] {
  const wanted = `${name}=${value}`;
  return otherProcesses().filter((pid) => {
    try {
      return readFileSync(`/proc/${pid}/environ`, "utf8").split("\0").includes(wanted);
    } catch {
      return false; // Gone in the meantime, or another user's.
    }
  });
}

function otherProcesses(): number[] {
  return readdirSync("/proc")
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
    .filter((pid) => pid !== process.pid);
}

/** Ends a process that is not our child (an orphan of an earlier run) and waits until it is gone. */
export async function endOrphan(pid: number, patienceMs = 30_000): Promise<void> {
  const birth = birthOf(pid);
  if (birth === null) return;
  process.kill(pid, "SIGTERM");
  const deadline = Date.now() + patienceMs;
  while (birthOf(pid) === birth) {
    if (Date.now() > deadline) process.kill(pid, "SIGKILL");
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}
