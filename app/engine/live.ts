import type { LiveConductor, LiveFrom } from "./analysis";
import type { Circuit } from "./circuit";
import {
  energise,
  isReached,
  passes,
  wayTo,
  type Condition,
  type Energised,
  type Instance,
  type Reach,
} from "./energise";

/**
 * Nodes that an instance reaches only through a load, a lamp or a capacitor, each with the link it was reached by.
 * A load passes the potential of one pole on when the other pole is parted. Nodes held by the other pole stop the walk.
 */
export function reachThroughLoads(circuit: Circuit, instance: Instance, conducts: Uint8Array): Reach {
  const { hot, ret, supply } = instance;
  const reach = Int32Array.from(hot);
  const queue: number[] = [];
  for (let node = 0; node < reach.length; node++) {
    if (isReached(hot, node)) queue.push(node);
    else if (supply.domain === "mains" && isReached(ret, node)) {
      reach[node] = ret[node] ?? -1;
      queue.push(node);
    }
  }
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head];
    if (node === undefined) break;
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined) continue;
      const isLoad = link.kind === "consumer" || (link.kind === "shunt" && supply.domain !== "dc");
      const sense = supply.domain === "dc" ? "with" : "either";
      if (!isLoad && !passes(link, conducts[index] ?? 0, node, sense)) continue;
      const next = link.a === node ? link.b : link.a;
      if (isReached(reach, next) || isReached(ret, next)) continue;
      reach[next] = index;
      queue.push(next);
    }
  }
  return reach;
}

type How = LiveFrom["how"];
const rank: Record<How, number> = { direct: 0, neutral: 1, "through-load": 2 };

function howLive(instance: Instance, through: Reach, node: number): How | null {
  if (isReached(instance.hot, node)) return "direct";
  if (isReached(instance.ret, node)) return instance.supply.domain === "mains" ? "neutral" : null;
  return isReached(through, node) ? "through-load" : null;
}

interface Prepared {
  energised: Energised;
  through: Reach[];
}

function prepare(circuit: Circuit, energised: Energised): Prepared {
  return {
    energised,
    through: energised.instances.map((instance) => reachThroughLoads(circuit, instance, energised.conducts)),
  };
}

/** Best way in which a node is live, over all that the source feeds. */
function liveAt({ energised, through }: Prepared, node: number): { how: How; instance: Instance } | null {
  let best: { how: How; instance: Instance } | null = null;
  energised.instances.forEach((instance, index) => {
    const reach = through[index];
    const how = reach === undefined ? null : howLive(instance, reach, node);
    if (how !== null && (best === null || rank[how] < rank[best.how])) best = { how, instance };
  });
  return best;
}

/** Every conductor that is live, or may be, in the given positions with all sources present, and from which source. */
export function liveConductors(circuit: Circuit, positions: Condition["positions"]): LiveConductor[] {
  const bySource = circuit.sources.map((source) => ({
    source,
    sure: prepare(circuit, energise(circuit, source, { positions, includePossible: false })),
    wide: prepare(circuit, energise(circuit, source, { positions, includePossible: true })),
  }));
  return circuit.view.wired.flatMap((conductor): LiveConductor[] => {
    const node = circuit.view.nodeOf(conductor.from.element, conductor.from.terminal);
    const from = bySource.flatMap(({ source, sure, wide }): LiveFrom[] => {
      const certain = liveAt(sure, node);
      const found = certain ?? liveAt(wide, node);
      if (found === null) return [];
      const pole = found.how === "neutral" ? "ret" : "hot";
      return [
        {
          source: source.element,
          via: found.how === "through-load" ? [] : wayTo(circuit, found.instance, node, pole).elements,
          how: found.how,
          certainty: certain === null ? "possible" : "certain",
        },
      ];
    });
    return from.length === 0 ? [] : [{ conductor: conductor.id, from }];
  });
}

/** As `liveConductors`, but only which conductors per source, sure or not: for going through many combinations. */
export function liveSets(circuit: Circuit, energised: Energised[]): Record<string, string[]> {
  const live: Record<string, string[]> = {};
  const nodes = circuit.view.wired.map(({ id, from }) => ({
    id,
    node: circuit.view.nodeOf(from.element, from.terminal),
  }));
  for (const each of energised) {
    const prepared = prepare(circuit, each);
    live[each.source.element] = nodes
      .filter(({ node }) => liveAt(prepared, node) !== null)
      .map(({ id }) => id);
  }
  return live;
}
