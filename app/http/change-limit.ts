/**
 * Counts changes by client network in windows of a minute. Simple on purpose: it stops a runaway script, while signing in
 * has a throttle of its own.
 */
export function createChangeLimit(perMinute: number): (address: string, now: number) => number | null {
  let windowStart = 0;
  let counts = new Map<string, number>();
  /** Counts one; gives the seconds to wait when it is one too many, otherwise null. */
  return (address, now) => {
    if (now - windowStart >= 60_000) {
      windowStart = now;
      counts = new Map();
    }
    const count = (counts.get(address) ?? 0) + 1;
    counts.set(address, count);
    return count > perMinute ? Math.ceil((windowStart + 60_000 - now) / 1000) : null;
  };
}
