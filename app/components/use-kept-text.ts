import { useCallback, useEffect, useRef, useState } from "react";
import { apiRequest } from "./api-request";

export type TextSaveState =
  { kind: "saved" } | { kind: "unsaved" } | { kind: "saving" } | { kind: "failed"; message: string };

const PAUSE_MS = 1_000;
const RETRY_MS = 5_000;

/**
 * A text that saves itself by PUT {text} and is kept in the browser until the server has it. Coming back after a failed
 * saving finds it again and goes on trying.
 */
export function useKeptText({
  url,
  keptKey,
  saved,
  onSaved,
}: {
  url: string;
  keptKey: string;
  /** What the server has. */
  saved: string;
  onSaved: () => void;
}) {
  const [text, setTyped] = useState(saved);
  const [state, setState] = useState<TextSaveState>({ kind: "saved" });
  const latest = useRef(saved);
  const onServer = useRef(saved);
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined);
  const running = useRef<Promise<void> | null>(null);
  const tell = useRef(onSaved);
  useEffect(() => {
    tell.current = onSaved;
  });

  const flush = useCallback((): Promise<void> => {
    clearTimeout(timer.current);
    if (running.current) return running.current;
    const sending = latest.current;
    if (sending === onServer.current) return Promise.resolve();
    setState({ kind: "saving" });
    running.current = apiRequest(url, { method: "PUT", json: { text: sending } }).then((result) => {
      running.current = null;
      if (!result.ok) {
        setState({ kind: "failed", message: result.message });
        // What the server refuses it will refuse again; what didn't reach it may reach it later.
        if (result.status === 0 || result.status >= 500)
          timer.current = setTimeout(() => void flush(), RETRY_MS);
        return;
      }
      onServer.current = sending;
      if (latest.current === sending) {
        drop(keptKey);
        setState({ kind: "saved" });
        tell.current();
      } else {
        timer.current = setTimeout(() => void flush(), PAUSE_MS);
      }
    });
    return running.current;
  }, [url, keptKey]);

  const setText = useCallback(
    (next: string) => {
      latest.current = next;
      setTyped(next);
      keep(keptKey, next);
      setState({ kind: "unsaved" });
      clearTimeout(timer.current);
      timer.current = setTimeout(() => void flush(), PAUSE_MS);
    },
    [keptKey, flush],
  );

  useEffect(() => {
    const kept = read(keptKey);
    if (kept !== null && kept !== onServer.current) setText(kept);
    return () => {
      void flush();
    };
  }, [keptKey, setText, flush]);

  return { text, setText, state, flush };
}

function read(key: string): string | null {
  try {
    return localStorage.getItem(key);
  } catch {
    return null;
  }
}

function keep(key: string, text: string): void {
  try {
    localStorage.setItem(key, text);
  } catch {
    // No storage: the server's copy alone, whose state is shown.
  }
}

function drop(key: string): void {
  try {
    localStorage.removeItem(key);
  } catch {
    // Nothing to drop where nothing can be kept.
  }
}
