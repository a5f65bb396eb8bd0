import { useEffect } from "react";
import { useRevalidator } from "react-router";

const PAUSE_MS = 2_000;

/**
 * Reads the page again now and then until its PDF is there. Asks first whether the server answers at all: a page that
 * can't be read again gives way to an error page, and nobody would look any more.
 */
export function usePdfWatch(ready: boolean): void {
  const { revalidate } = useRevalidator();
  useEffect(() => {
    if (ready) return;
    const ending = new AbortController();
    const look = async () => {
      if (document.visibilityState !== "visible") return;
      const answers = await fetch("/healthz", { signal: ending.signal }).then(
        ({ ok }) => ok,
        () => false,
      );
      if (answers && !ending.signal.aborted) await revalidate();
    };
    const timer = setInterval(() => void look(), PAUSE_MS);
    return () => {
      ending.abort();
      clearInterval(timer);
    };
  }, [ready, revalidate]);
}
