import { z } from "zod";
import { energyMapSchema, type EnergyMap } from "~/engine/energy-map";

/** What was typed and could not be saved, kept in the browser under the unit's own key. */
export interface KeptMap {
  map: EnergyMap;
  /** The edition that it was made from. */
  edition: number;
  /** ISO moment. */
  at: string;
}

const keptSchema = z.object({ map: energyMapSchema, edition: z.number().int(), at: z.string() });

/** Reads what was kept; null when there is nothing, or nothing that can be read any more. */
export function readKeptMap(key: string): KeptMap | null {
  try {
    const text = localStorage.getItem(key);
    if (text === null) return null;
    const parsed = keptSchema.safeParse(JSON.parse(text));
    return parsed.success ? parsed.data : null;
  } catch {
    // No storage (private window, blocked) or broken text: as if nothing was kept.
    return null;
  }
}

export function keepMap(key: string, kept: KeptMap): void {
  try {
    localStorage.setItem(key, JSON.stringify(kept));
  } catch {
    // Full or blocked: the server's copy is the one that counts, and its state is shown.
  }
}

export function forgetMap(key: string): void {
  try {
    localStorage.removeItem(key);
  } catch {
    // Nothing to forget where nothing can be kept.
  }
}
