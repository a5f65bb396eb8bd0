import { useEffect } from "react";
import { useRevalidator } from "react-router";

const PAUSE_MS = 2_000;

/** Reads the page again now and then until its PDF is there. */
export function usePdfWatch(ready: boolean): void {
  const { revalidate } = useRevalidator();
  useEffect(() => {
    if (ready) return;
    const timer = setInterval(() => {
      if (document.visibilityState === "visible") void revalidate();
    }, PAUSE_MS);
    return () => clearInterval(timer);
  }, [ready, revalidate]);
}
