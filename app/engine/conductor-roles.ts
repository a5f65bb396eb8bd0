import { circuitOf } from "./circuit";
import { configurations, energise, isReached } from "./energise";
import type { EnergyMap } from "./energy-map";
import { viewOf } from "./map-view";

/** What a conductor is, for its colour by IEC 60445; "ac" is the secondary of a transformer, "other" what no source reaches. */
export type ConductorRole = "line" | "neutral" | "earth" | "plus" | "minus" | "ac" | "other";

const poleRoles = {
  mains: { hot: "line", ret: "neutral" },
  dc: { hot: "plus", ret: "minus" },
  ac: { hot: "ac", ret: "ac" },
} as const;

/** Role of each conductor with everything switched on. Nearer sources count first; an earth conductor is one by its circuit. */
export function conductorRoles(map: EnergyMap): Map<string, ConductorRole> {
  const circuit = circuitOf(viewOf(map));
  const roles = new Map<string, ConductorRole>();
  for (const { id, circuit: belongs } of circuit.view.wired) if (belongs === "earth") roles.set(id, "earth");
  const instances = configurations(circuit, () => null).flatMap((positions) =>
    circuit.sources.flatMap(
      (source) => energise(circuit, source, { positions, includePossible: false }).instances,
    ),
  );
  for (const { supply, hot, ret } of instances) {
    for (const { id, from } of circuit.view.wired) {
      if (roles.has(id)) continue;
      const node = circuit.view.nodeOf(from.element, from.terminal);
      if (isReached(hot, node)) roles.set(id, poleRoles[supply.domain].hot);
      else if (isReached(ret, node)) roles.set(id, poleRoles[supply.domain].ret);
    }
  }
  for (const { id } of circuit.view.wired) if (!roles.has(id)) roles.set(id, "other");
  return roles;
}
