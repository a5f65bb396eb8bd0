import type { ConductorProtection } from "./analysis";
import { ambientFactor, ampacityOf } from "./conductor-data";
import type { Conductor } from "./energy-map";
import type { MapView } from "./map-view";
import type { Citation } from "./rule-set";
import { list } from "./wording";

/** Rules of practice that decide verdicts on fusing. None of them was seen in a standard. */

export const unprotectedLeadCitation: Citation = {
  standard: "workshop practice",
  clause: "fuse within about 180 mm of the battery's pole, before any branch",
  edition: "none",
  mark: "M",
};

export const socketProtectionCitation: Citation = {
  standard: "workshop practice",
  clause: "cord of 0.75 mm² or more accepted behind a socket's breaker of up to 16 A",
  edition: "none",
  mark: "M",
};

export const transformerShortCitation: Citation = {
  standard: "workshop practice",
  clause: "short-circuit voltage of small transformers taken as 5 %",
  edition: "none",
  mark: "M",
  note: "The lowest usual value, which gives the largest fault current.",
};

export const ambientCitation: Citation = {
  standard: "BS 7671",
  clause: "Table 4F3A, factors for cords of 60 °C",
  edition: "not checked",
  mark: "V",
};

/** Where the ratings of the conductors that a source feeds come from, each once; only those that were used. */
export function conductorCitations(view: MapView, source: string, fed: ConductorProtection[]): Citation[] {
  const wires = fed.flatMap(({ conductor }) => view.conductors.get(conductor) ?? []);
  const found = new Set<Citation>();
  for (const conductor of wires) {
    const ampacity = ampacityOf(conductor);
    if (ampacity !== null) found.add(ampacity.citation);
    if ((ambientFactor(conductor.ambientC ?? null) ?? 1) < 1) found.add(ambientCitation);
  }
  const kind = view.elements.get(source)?.kind;
  if (kind === "battery") found.add(unprotectedLeadCitation);
  if (kind === "mains-inlet") found.add(socketProtectionCitation);
  // A conductor of unknown area still needs a table to be judged by.
  if (found.size === 0) found.add(unknownArea);
  return [...found];
}

const unknownArea: Citation = {
  standard: "workshop practice",
  clause: "no cross-section, no rating",
  edition: "none",
  mark: "M",
};

/** Says for which air the ratings hold, where the map does not state how warm it is. */
export function ambientNote(conductors: Conductor[]): string[] {
  const unstated = conductors.filter(({ ambientC }) => ambientC === null || ambientC === undefined);
  return unstated.length === 0
    ? []
    : [
        `The ratings of ${list(unstated.map(({ id }) => id))} are for air of up to 30 °C, since the map states none. Where it is warmer around them, put that on the map.`,
      ];
}
