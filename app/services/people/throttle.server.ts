import { and, asc, count, eq, gt, inArray, lt, min } from "drizzle-orm";
import { type Database, tables } from "~/db/client.server";
import { ThrottledError } from "~/services/errors";

const { failedTries } = tables;

const WINDOW_MS = 15 * 60_000;
const KEEP_MS = 24 * 3_600_000;

export interface ThrottleKey {
  key: string;
  /** How many failed tries a window may hold. */
  limit: number;
}

/** Tries of one person's password, from anywhere. */
export function mailKey(purpose: "sign-in" | "reset", email: string): ThrottleKey {
  return { key: `${purpose}:mail:${email.trim().toLowerCase()}`, limit: 5 };
}

/**
 * Tries of a signed-in person to confirm their password. Apart from the tries to sign in: those anybody can use up who
 * knows the mail, and so keep an electrician from withdrawing a signature.
 */
export function confirmKey(personId: number): ThrottleKey {
  return { key: `confirm:person:${personId}`, limit: 5 };
}

/** Tries from one address, at any password. A whole IPv6 /64 is one customer, hence one key. */
export function addressKey(purpose: "sign-in" | "reset" | "confirm", address: string): ThrottleKey {
  return { key: `${purpose}:address:${network(address)}`, limit: 30 };
}

/** The address itself for IPv4, the first four groups of an IPv6 address. */
export function network(address: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address);
  if (mapped?.[1]) return mapped[1];
  if (!address.includes(":")) return address;
  const [head = "", tail] = address.split("%")[0]?.split("::") ?? [];
  const left = head === "" ? [] : head.split(":");
  const right = tail === undefined || tail === "" ? [] : tail.split(":");
  const zeros = tail === undefined ? 0 : Math.max(0, 8 - left.length - right.length);
  const groups = [...left, ...Array.from({ length: zeros }, () => "0"), ...right];
  return `${groups
    .slice(0, 4)
    .map((group) => Number.parseInt(group, 16).toString(16))
    .join(":")}::/64`;
}

export interface Try {
  /** The try was no failure after all: forget it, and with `everything` all earlier ones under these keys too. */
  forgive(everything: readonly ThrottleKey[]): Promise<void>;
}

/**
 * Notes a try as failed before its password is looked at, so that many at once can't slip through between counting
 * and noting. The caller forgives it on success.
 *
 * @throws ThrottledError when one of the keys is used up; such a try isn't counted
 */
export async function noteTry(db: Database, keys: readonly ThrottleKey[], now: Date): Promise<Try> {
  const since = new Date(now.getTime() - WINDOW_MS);
  const noted = await db
    .insert(failedTries)
    .values(keys.map(({ key }) => ({ key, at: now })))
    .$returningId();
  const ids = noted.map((row) => row.id);
  const counts = await db
    .select({ key: failedTries.key, tries: count(), first: min(failedTries.at) })
    .from(failedTries)
    .where(
      and(
        inArray(
          failedTries.key,
          keys.map(({ key }) => key),
        ),
        gt(failedTries.at, since),
      ),
    )
    .groupBy(failedTries.key)
    .orderBy(asc(failedTries.key));
  const full = counts.filter((row) => row.tries > (keys.find(({ key }) => key === row.key)?.limit ?? 0));
  if (full.length > 0) {
    await db.delete(failedTries).where(inArray(failedTries.id, ids));
    const frees = full.map((row) => (row.first ?? now).getTime() + WINDOW_MS - now.getTime());
    throw new ThrottledError(Math.max(1, ...frees.map((milliseconds) => milliseconds / 1000)));
  }
  return {
    async forgive(everything) {
      await db.delete(failedTries).where(inArray(failedTries.id, ids));
      for (const { key } of everything) await db.delete(failedTries).where(eq(failedTries.key, key));
    },
  };
}

/** Deletes tries that count nowhere any more. */
export async function sweepTries(db: Database, now: Date): Promise<void> {
  await db.delete(failedTries).where(lt(failedTries.at, new Date(now.getTime() - KEEP_MS)));
}
