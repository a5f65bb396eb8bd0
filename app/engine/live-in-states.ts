import type { LiveConductor } from "./analysis";
import { circuitOf } from "./circuit";
import type { EnergyMap } from "./energy-map";
import { liveConductors } from "./live";
import { viewOf } from "./map-view";

/** Which conductors are live, or may be, with the switches as given and all sources present. One not named is on. */
export function liveInStates(map: EnergyMap, states: Record<string, "on" | "off">): LiveConductor[] {
  const circuit = circuitOf(viewOf(map));
  return liveConductors(
    circuit,
    new Map(circuit.switches.map(({ id }) => [id, states[id] === "off" ? "off" : "on"])),
  );
}
