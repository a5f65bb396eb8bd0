import type { Circuit, Transfer } from "./circuit";
import { isReached, passes, wayWithin, type Instance } from "./energise";

/** At most so many ways are told for one pair of sources and one condition; more add nothing to the finding. */
const waysToTell = 8;
/** Steps of the search for further ways, over a whole map. Beyond it one way is told where there are more. */
export const stepsInAll = 100_000;

export interface Budget {
  steps: number;
}

interface Steps {
  elements: string[];
  conductors: string[];
}

/** The stages before an instance, each by one way, and every way without repeats inside it. */
export function simpleWays(
  circuit: Circuit,
  instance: Instance,
  target: number,
  pole: "hot" | "ret",
  conducts: Uint8Array,
  budget: Budget,
): Steps[] {
  const before: Steps[] =
    instance.parent === null
      ? [{ elements: [], conductors: [] }]
      : throughTransfer(circuit, instance.parent.instance, instance.parent.transfer, conducts, budget);
  const inside = waysInside(circuit, instance, target, pole, conducts, budget);
  return before
    .flatMap((first) =>
      inside.map((then) => ({
        elements: withoutRepeats([...first.elements, ...then.elements]),
        conductors: [...first.conductors, ...then.conductors],
      })),
    )
    .slice(0, waysToTell);
}

function throughTransfer(
  circuit: Circuit,
  parent: Instance,
  transfer: Transfer,
  conducts: Uint8Array,
  budget: Budget,
): Steps[] {
  const node = isReached(parent.hot, transfer.from.hot) ? transfer.from.hot : transfer.from.ret;
  return simpleWays(circuit, parent, node, "hot", conducts, budget).map((way) => ({
    ...way,
    elements: [...way.elements, transfer.element],
  }));
}

const withoutRepeats = (ids: string[]) => ids.filter((id, index) => id !== ids[index - 1]);

/** Every way, the shortest first; the shortest alone when the search has taken too many steps already. */
function waysInside(
  circuit: Circuit,
  instance: Instance,
  target: number,
  pole: "hot" | "ret",
  conducts: Uint8Array,
  budget: Budget,
): Steps[] {
  if (budget.steps <= 0) return [wayWithin(circuit, instance[pole], target)];
  const begin = instance.supply[pole];
  const sense = instance.supply.domain !== "dc" ? "either" : pole === "hot" ? "with" : "against";
  const found: Steps[] = [];
  const seen = new Set([begin]);
  const elements: string[] = [];
  const conductors: string[] = [];
  const go = (node: number) => {
    if (found.length >= waysToTell || budget.steps-- <= 0) return;
    if (node === target) {
      found.push({ elements: [...elements], conductors: [...conductors] });
      return;
    }
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || !passes(link, conducts[index] ?? 0, node, sense)) continue;
      const next = link.a === node ? link.b : link.a;
      if (seen.has(next)) continue;
      seen.add(next);
      if (link.element !== null) elements.push(link.element);
      if (link.conductor !== null) conductors.push(link.conductor);
      go(next);
      if (link.element !== null) elements.pop();
      if (link.conductor !== null) conductors.pop();
      seen.delete(next);
    }
  };
  go(begin);
  return found.length > 0 ? found : [wayWithin(circuit, instance[pole], target)];
}
