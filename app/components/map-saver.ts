import type { EnergyMap } from "~/engine/energy-map";

export type SaveState =
  /** Everything typed is on the server; `at` is null when nothing was typed yet. */
  | { kind: "saved"; at: string | null }
  | { kind: "unsaved" }
  | { kind: "saving" }
  /** Not on the server; tried again by itself. */
  | { kind: "retrying"; message: string }
  /** Saved elsewhere meanwhile: a person must choose. */
  | { kind: "conflict"; theirs: EnergyMap; edition: number; message: string }
  /** The server won't take it (the unit has moved on, or the session ended); what was typed stays on this device. */
  | { kind: "refused"; message: string; signedOut?: boolean };

export type PutAnswer =
  | { kind: "saved"; edition: number; at: string }
  | { kind: "conflict"; theirs: EnergyMap; edition: number; message: string }
  | { kind: "later"; message: string }
  | { kind: "refused"; message: string; signedOut?: boolean };

export interface MapSaver {
  /** Tells of a change; it is saved after a short pause in typing. */
  change(map: EnergyMap): void;
  /** Saves at once what isn't saved; true when everything is on the server. */
  flush(): Promise<boolean>;
  /** Ends a conflict: saves what is here over the other version, or takes the other one as the base. */
  resolve(choice: "mine" | "theirs"): void;
  /** What waits to be saved, with the edition that it was made from; null when nothing does. */
  pending(): { map: EnergyMap; edition: number } | null;
  stop(): void;
}

export interface MapSaverOptions {
  edition: number;
  put: (map: EnergyMap, edition: number) => Promise<PutAnswer>;
  onState: (state: SaveState) => void;
}

const PAUSE_MS = 800;
const LONGEST_WAIT_MS = 30_000;

/**
 * Saves a draft while it is typed: one request at a time, always the newest map, tried again with growing pauses while
 * the server can't be reached, and stopped where a person must decide.
 */
export function createMapSaver({ edition: firstEdition, put, onState }: MapSaverOptions): MapSaver {
  let edition = firstEdition;
  let waiting: EnergyMap | null = null;
  let running: Promise<void> | null = null;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let failures = 0;
  let halted: "conflict" | "refused" | null = null;
  let conflictEdition = 0;

  function plan(delay: number) {
    clearTimeout(timer);
    timer = setTimeout(() => void save(), delay);
  }

  function save(): Promise<void> {
    clearTimeout(timer);
    if (running) return running;
    if (!waiting || halted) return Promise.resolve();
    const map = waiting;
    waiting = null;
    onState({ kind: "saving" });
    running = put(map, edition)
      .catch((): PutAnswer => ({ kind: "later", message: "The server can't be reached." }))
      .then((answer) => {
        running = null;
        // What was typed meanwhile is newer than what failed.
        if (answer.kind !== "saved") waiting ??= map;
        settle(answer);
      });
    return running;
  }

  function settle(answer: PutAnswer) {
    switch (answer.kind) {
      case "saved":
        edition = answer.edition;
        failures = 0;
        if (waiting) {
          onState({ kind: "unsaved" });
          plan(PAUSE_MS);
        } else {
          onState({ kind: "saved", at: answer.at });
        }
        return;
      case "later":
        failures++;
        onState({ kind: "retrying", message: answer.message });
        plan(Math.min(LONGEST_WAIT_MS, 1_000 * 2 ** failures));
        return;
      case "conflict":
        halted = "conflict";
        conflictEdition = answer.edition;
        onState(answer);
        return;
      case "refused":
        halted = "refused";
        onState(answer);
    }
  }

  return {
    change(map) {
      waiting = map;
      if (halted || running) return;
      if (failures === 0) {
        onState({ kind: "unsaved" });
        plan(PAUSE_MS);
      }
    },
    async flush() {
      while ((running || waiting) && !halted) {
        await save();
        if (failures > 0) break;
      }
      return !waiting && !running;
    },
    resolve(choice) {
      if (halted !== "conflict") return;
      halted = null;
      edition = conflictEdition;
      if (choice === "mine") {
        void save();
      } else {
        waiting = null;
        onState({ kind: "saved", at: null });
      }
    },
    pending: () => (waiting ? { map: waiting, edition } : null),
    stop: () => clearTimeout(timer),
  };
}
