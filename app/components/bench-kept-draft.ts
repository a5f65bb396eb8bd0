import { useCallback, useEffect, useState } from "react";

/**
 * A form's unsent input, kept in the browser under `key` until it has been sent: leaving the page, a dead battery or a
 * lost connection lose nothing. `parse` gets what was kept and returns null for anything that it can't use.
 *
 * @returns the values, a setter that takes changes, a function that forgets them after sending or on request, and
 *   whether they were restored from an earlier visit
 */
export function useKeptDraft<Values extends object>(
  key: string,
  initial: Values,
  parse: (kept: unknown) => Values | null,
): { values: Values; change: (changes: Partial<Values>) => void; forget: () => void; restored: boolean } {
  const [values, setValues] = useState(initial);
  const [restored, setRestored] = useState(false);

  // After hydration, so that the server's page and the browser's first one agree.
  useEffect(() => {
    const kept = read(key);
    const parsed = kept === null ? null : parse(kept);
    if (parsed !== null) {
      setValues(parsed);
      setRestored(true);
    }
    // `parse` is a plain function of the form; only another key means another form.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [key]);

  const change = useCallback(
    (changes: Partial<Values>) =>
      setValues((before) => {
        const after = { ...before, ...changes };
        write(key, after);
        return after;
      }),
    [key],
  );

  const forget = useCallback(() => {
    remove(key);
    setRestored(false);
    setValues(initial);
    // The initial values are made anew at each rendering; those of this moment are the right ones.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [key]);

  return { values, change, forget, restored };
}

/** Storage can be full or forbidden; the form then works without it. */
function read(key: string): unknown {
  try {
    const text = localStorage.getItem(key);
    return text === null ? null : JSON.parse(text);
  } catch {
    return null;
  }
}

function write(key: string, values: object): void {
  try {
    localStorage.setItem(key, JSON.stringify(values));
  } catch {
    return;
  }
}

function remove(key: string): void {
  try {
    localStorage.removeItem(key);
  } catch {
    return;
  }
}
