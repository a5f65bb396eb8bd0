import { useCallback, useEffect, useReducer, useRef, useState } from "react";
import { z } from "zod";
import { energyMapSchema, type EnergyMap } from "~/engine/energy-map";
import { apiRequest } from "./api-request";
import { forgetMap, keepMap, type KeptMap, readKeptMap } from "./kept-map";
import { editMap, type EditorAction, type EditorState, startEditing } from "./map-editor-state";
import { createMapSaver, type MapSaver, type PutAnswer, type SaveState } from "./map-saver";

export interface MapDraftOptions {
  /** The API's address of the unit's map. */
  url: string;
  /** Names the copy kept in the browser. */
  keptKey: string;
  map: EnergyMap;
  edition: number;
  revision: number;
}

export interface MapDraft {
  state: EditorState;
  act: (action: EditorAction) => void;
  save: SaveState;
  flush: () => Promise<boolean>;
  choose: (choice: "mine" | "theirs") => void;
  /** What an earlier visit typed and could not save; null when nothing, or decided. */
  kept: KeptMap | null;
  decideKept: (choice: "take" | "drop") => void;
}

const savedSchema = z.object({ edition: z.number().int(), savedAt: z.string() });
const conflictSchema = z.object({ theirs: energyMapSchema, edition: z.number().int() });

/** A map being edited, saving itself to the server and, until that is done, in the browser. */
export function useMapDraft({ url, keptKey, map, edition, revision }: MapDraftOptions): MapDraft {
  const [state, dispatch] = useReducer(editMap, map, startEditing);
  const [save, setSave] = useState<SaveState>({ kind: "saved", at: null });
  const [kept, setKept] = useState<KeptMap | null>(null);
  const saver = useRef<MapSaver | null>(null);
  const savedMap = useRef(map);
  const base = useRef(edition);

  useEffect(() => {
    const made = createMapSaver({
      edition: base.current,
      put: async (draft, from) => {
        const answer = await putMap(url, { map: draft, edition: from, revision });
        if (answer.kind === "saved") base.current = answer.edition;
        return answer;
      },
      onState: (next) => {
        if (next.kind === "saved") forgetMap(keptKey);
        setSave(next);
      },
    });
    saver.current = made;
    const found = readKeptMap(keptKey);
    if (found && JSON.stringify(found.map) !== JSON.stringify(savedMap.current)) setKept(found);
    const flushNow = () => void made.flush();
    window.addEventListener("pagehide", flushNow);
    window.addEventListener("online", flushNow);
    return () => {
      window.removeEventListener("pagehide", flushNow);
      window.removeEventListener("online", flushNow);
      void made.flush();
      made.stop();
    };
  }, [url, keptKey, revision]);

  useEffect(() => {
    if (state.map === savedMap.current) return;
    savedMap.current = state.map;
    keepMap(keptKey, { map: state.map, edition: base.current, at: new Date().toISOString() });
    saver.current?.change(state.map);
  }, [state.map, keptKey]);

  const flush = useCallback(async () => (await saver.current?.flush()) ?? true, []);

  function choose(choice: "mine" | "theirs") {
    if (choice === "theirs" && save.kind === "conflict") {
      savedMap.current = save.theirs;
      dispatch({ type: "replace", map: save.theirs, what: "Took the other version" });
      forgetMap(keptKey);
    }
    if (save.kind === "conflict") base.current = save.edition;
    saver.current?.resolve(choice);
  }

  function decideKept(choice: "take" | "drop") {
    if (kept && choice === "take") {
      dispatch({ type: "replace", map: kept.map, what: "Brought back what was kept on this device" });
    }
    if (choice === "drop") forgetMap(keptKey);
    setKept(null);
  }

  return { state, act: dispatch, save, flush, choose, kept, decideKept };
}

async function putMap(
  url: string,
  json: { map: EnergyMap; edition: number; revision: number },
): Promise<PutAnswer> {
  const result = await apiRequest(url, { method: "PUT", json });
  if (result.ok) {
    const saved = savedSchema.safeParse(result.data);
    return saved.success
      ? { kind: "saved", edition: saved.data.edition, at: saved.data.savedAt }
      : { kind: "later", message: "The server's answer made no sense." };
  }
  if (result.status === 409) {
    const conflict = conflictSchema.safeParse(result.data);
    if (conflict.success) return { kind: "conflict", ...conflict.data, message: result.message };
  }
  if (result.status === 0 || result.status === 429 || result.status >= 500) {
    return { kind: "later", message: result.message };
  }
  return { kind: "refused", message: result.message, signedOut: result.status === 401 };
}
