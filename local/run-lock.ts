import { linkSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { z } from "zod";
import { birthOf } from "./processes";

const holderSchema = z.object({
  pid: z.int().positive(),
  birth: z.string(),
  address: z.string().nullable(),
});
export type LockHolder = z.infer<typeof holderSchema>;

export type LockAttempt =
  { taken: true; tellAddress(address: string): void; release(): void } | { taken: false; holder: LockHolder };

/**
 * Takes the lock that lets one run at a time use a data folder. A lock whose process is gone (crash, kill -9,
 * power cut, or its number now belongs to another program) is stale and gives way.
 */
export function takeRunLock(folder: string): LockAttempt {
  const file = join(folder, "run.lock");
  const own = join(folder, `run.lock.${process.pid}`);
  const birth = birthOf(process.pid) ?? "unknown";
  const write = (target: string, address: string | null) =>
    writeFileSync(target, JSON.stringify({ pid: process.pid, birth, address } satisfies LockHolder), {
      mode: 0o600,
    });
  write(own, null);
  try {
    for (;;) {
      try {
        // Unlike open-then-write, a link appears whole or not at all.
        linkSync(own, file);
        return {
          taken: true,
          tellAddress(address) {
            write(own, address);
            renameSync(own, file);
          },
          release: () => rmSync(file, { force: true }),
        };
      } catch (error) {
        if (!isExists(error)) throw error;
      }
      const holder = readHolder(file);
      if (holder !== null && birthOf(holder.pid) === holder.birth) return { taken: false, holder };
      setStaleAside(file);
    }
  } finally {
    rmSync(own, { force: true });
  }
}

/** Removes a stale lock; one that another start has taken in the meantime is put back. */
function setStaleAside(file: string): void {
  const aside = `${file}.stale.${process.pid}`;
  try {
    renameSync(file, aside);
    const moved = readHolder(aside);
    if (moved !== null && birthOf(moved.pid) === moved.birth) linkSync(aside, file);
  } catch (error) {
    if (!isMissing(error) && !isExists(error)) throw error;
  } finally {
    rmSync(aside, { force: true });
  }
}

/** Who holds the lock, or null when the file is gone or unreadable. */
export function readHolder(file: string): LockHolder | null {
  try {
    return holderSchema.parse(JSON.parse(readFileSync(file, "utf8")));
  } catch {
    return null;
  }
}

function isMissing(error: unknown): boolean {
  return error instanceof Error && "code" in error && error.code === "ENOENT";
}

function isExists(error: unknown): boolean {
  return error instanceof Error && "code" in error && error.code === "EEXIST";
}
