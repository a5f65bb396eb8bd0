import { circuitOf } from "./circuit";
import { configurations, energise, isReached } from "./energise";
import type { EnergyMap } from "./energy-map";
import { viewOf } from "./map-view";
import type { Problem } from "./problem";

/** Conductors that are said to belong to one circuit and are fed by another, with everything switched on. */
export function circuitContradictions(map: EnergyMap): Problem[] {
  const circuit = circuitOf(viewOf(map));
  const { view } = circuit;
  const mains = new Map<string, string>();
  const low = new Map<string, string>();
  for (const positions of configurations(circuit, () => null)) {
    for (const source of circuit.sources) {
      for (const { supply, hot, ret } of energise(circuit, source, { positions, includePossible: false })
        .instances) {
        const reached = supply.domain === "mains" ? mains : low;
        for (const { id, from } of view.wired) {
          const node = view.nodeOf(from.element, from.terminal);
          if ((isReached(hot, node) || isReached(ret, node)) && !reached.has(id))
            reached.set(id, supply.element);
        }
      }
    }
  }
  return view.wired.flatMap(({ id, circuit: said }): Problem[] => {
    const fromMains = mains.get(id);
    const fromLow = low.get(id);
    const problem = (text: string): Problem => ({
      subject: { kind: "conductor", id },
      field: "circuit",
      text,
      blocking: true,
    });
    if (said === "elv" && fromMains !== undefined) {
      return [
        problem(`${id} is said to be extra-low voltage, but mains from ${view.name(fromMains)} reaches it.`),
      ];
    }
    if (said === "mains" && fromMains === undefined && fromLow !== undefined) {
      return [problem(`${id} is said to be mains, but only ${view.name(fromLow)} feeds it.`)];
    }
    if (said === "earth" && fromMains !== undefined) {
      return [
        problem(`${id} is said to be protective earth, but a pole of ${view.name(fromMains)} reaches it.`),
      ];
    }
    return [];
  });
}
