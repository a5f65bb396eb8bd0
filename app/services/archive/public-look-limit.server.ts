import { ThrottledError } from "~/services/errors";
import { network } from "~/services/people/throttle.server";

const WINDOW_MS = 60_000;
const LIMIT = 120;
const MOST_ADDRESSES = 10_000;

const looks = new Map<string, { since: number; count: number }>();

/**
 * Counts a look at a public page, per client network and in this process only: enough against guessing through codes,
 * never in the way of a class that scans its units.
 *
 * @throws ThrottledError beyond {@link LIMIT} looks a minute
 */
export function countLook(address: string, now: number): void {
  const key = network(address);
  const known = looks.get(key);
  if (!known || now - known.since >= WINDOW_MS) {
    if (looks.size >= MOST_ADDRESSES) forgetOld(now);
    looks.set(key, { since: now, count: 1 });
    return;
  }
  known.count++;
  if (known.count > LIMIT) throw new ThrottledError((known.since + WINDOW_MS - now) / 1000);
}

function forgetOld(now: number): void {
  for (const [key, { since }] of looks) if (now - since >= WINDOW_MS) looks.delete(key);
  // All of them recent: start over rather than grow without bound.
  if (looks.size >= MOST_ADDRESSES) looks.clear();
}
