import { spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, onTestFinished, test } from "vitest";
import { birthOf } from "./processes";
import { readHolder, takeRunLock } from "./run-lock";

function makeFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), "mg-lock-"));
  onTestFinished(() => rmSync(folder, { recursive: true }));
  return folder;
}

/** A process that lives until it is killed. */
async function bystander() {
  const child = spawn(process.execPath, ["-e", "console.log(1); setInterval(() => {}, 1000)"]);
  onTestFinished(() => void child.kill("SIGKILL"));
  await once(child.stdout, "data");
  const pid = child.pid ?? -1;
  return {
    pid,
    birth: birthOf(pid) ?? "",
    async kill() {
      child.kill("SIGKILL");
      await once(child, "exit");
    },
  };
}

const lockFile = (folder: string) => join(folder, "run.lock");

test("a free folder is taken, told about, and given back without leftovers", () => {
  const folder = makeFolder();
  const lock = takeRunLock(folder);
  if (!lock.taken) throw new Error("not taken");
  lock.tellAddress("http://localhost:3000");
  expect(readHolder(lockFile(folder))).toMatchObject({ pid: process.pid, address: "http://localhost:3000" });
  lock.release();
  expect(readdirSync(folder)).toEqual([]);
});

test("a second start learns who runs, and where", async () => {
  const folder = makeFolder();
  const { pid, birth } = await bystander();
  writeFileSync(lockFile(folder), JSON.stringify({ pid, birth, address: "http://localhost:3001" }));
  expect(takeRunLock(folder)).toEqual({
    taken: false,
    holder: { pid, birth, address: "http://localhost:3001" },
  });
  expect(readHolder(lockFile(folder))?.pid).toBe(pid);
});

test("the lock of a process that was killed gives way", async () => {
  const folder = makeFolder();
  const holder = await bystander();
  writeFileSync(lockFile(folder), JSON.stringify({ pid: holder.pid, birth: holder.birth, address: null }));
  expect(takeRunLock(folder).taken).toBe(false);
  await holder.kill();
  expect(takeRunLock(folder).taken).toBe(true);
  expect(readHolder(lockFile(folder))?.pid).toBe(process.pid);
});

test("a process number that now belongs to another program does not hold the lock", async () => {
  const folder = makeFolder();
  const { pid, birth } = await bystander();
  writeFileSync(lockFile(folder), JSON.stringify({ pid, birth: String(Number(birth) - 1), address: null }));
  expect(takeRunLock(folder).taken).toBe(true);
});

test("a half-written lock, as a power cut leaves it, gives way", () => {
  const folder = makeFolder();
  writeFileSync(lockFile(folder), '{"pid":12');
  expect(takeRunLock(folder).taken).toBe(true);
});
