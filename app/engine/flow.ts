import type { Circuit } from "./circuit";

/** Stands for "no device limits it" in sums of flows. */
const UNLIMITED = 1e12;

export interface NetworkQuestion {
  /** For each link how it conducts: 0 not, 1 from a to b, 2 both ways. */
  conducts: Uint8Array;
  /** Currents pass through loads, lamps and batteries too. */
  throughLoads: boolean;
  /** Element whose own link is left out: the source that asks. */
  exceptElement: string;
  /** Held by the hot or the return pole: a load passes current on from any but a return node, to any but a hot one. */
  isHot: (node: number) => boolean;
  isReturn: (node: number) => boolean;
  /** What each protective device lets through, A; a device that is not named lets everything through. */
  capacities: ReadonlyMap<string, number>;
  work?: Work;
}

/** What each link can carry from a to b and from b to a, A. Made once, asked often. */
export interface Network {
  ahead: Float64Array;
  back: Float64Array;
  work: Work;
}

/** Steps of search that are left; shared by all networks of one question, so that no map can hold up a computer. */
export interface Work {
  steps: number;
}

export interface Flow {
  /** Largest current that no device stops, A; may be `Infinity`. */
  amps: number;
  /** Devices that together set it. */
  devices: string[];
}

export function networkOf(circuit: Circuit, question: NetworkQuestion): Network {
  const ahead = new Float64Array(circuit.links.length);
  const back = new Float64Array(circuit.links.length);
  circuit.links.forEach((link, index) => {
    const isLoad = link.kind === "consumer";
    if (
      isLoad
        ? !question.throughLoads || link.element === question.exceptElement
        : question.conducts[index] === 0
    ) {
      return;
    }
    const amps = link.element === null ? UNLIMITED : (question.capacities.get(link.element) ?? UNLIMITED);
    const passesOn = (from: number, to: number) => !question.isReturn(from) && !question.isHot(to);
    const isAhead = isLoad ? passesOn(link.a, link.b) : true;
    const isBack = isLoad ? passesOn(link.b, link.a) : question.conducts[index] === 2;
    ahead[index] = isAhead ? Math.min(amps, UNLIMITED) : 0;
    back[index] = isBack ? Math.min(amps, UNLIMITED) : 0;
  });
  return { ahead, back, work: question.work ?? { steps: Infinity } };
}

/**
 * Largest flow between two nodes with devices as bottlenecks (augmenting shortest paths), and the smallest cut.
 * `skip` is the index of a link that is taken out, or -1.
 */
export function largestFlow(
  circuit: Circuit,
  network: Network,
  start: number,
  end: number,
  skip: number,
): Flow {
  if (start < 0 || end < 0) return { amps: 0, devices: [] };
  if (start === end) return { amps: Infinity, devices: [] };
  const flow = new Float64Array(circuit.links.length);
  let total = 0;
  for (let round = 0; round < 1000; round++) {
    const came = search(circuit, network, flow, start, end, skip);
    if ((came[end] ?? -1) < 0) return { amps: total, devices: crossing(circuit, came, network, skip) };
    const step = smallestResidual(circuit, came, start, end, network, flow);
    total += step;
    if (total >= UNLIMITED) return { amps: Infinity, devices: [] };
    push(circuit, came, start, end, flow, step);
  }
  return { amps: Infinity, devices: [] };
}

/** For each node the link it was reached by, -1 not reached, -2 the start. Ends as soon as the end is reached. */
function search(
  circuit: Circuit,
  network: Network,
  flow: Float64Array,
  start: number,
  end: number,
  skip: number,
): Int32Array {
  const came = new Int32Array(circuit.view.nodeCount).fill(-1);
  came[start] = -2;
  const queue = [start];
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head];
    if (node === undefined) break;
    const around = circuit.linksAt[node] ?? [];
    network.work.steps -= around.length;
    for (const index of around) {
      const link = circuit.links[index];
      if (link === undefined || index === skip) continue;
      const next = link.a === node ? link.b : link.a;
      if (came[next] !== -1 || residual(link.a === node, index, network, flow) <= 1e-9) continue;
      came[next] = index;
      if (next === end) return came;
      queue.push(next);
    }
  }
  return came;
}

function residual(
  fromA: boolean,
  index: number,
  { ahead, back }: Pick<Network, "ahead" | "back">,
  flow: Float64Array,
): number {
  const carried = flow[index] ?? 0;
  return fromA ? (ahead[index] ?? 0) - carried : (back[index] ?? 0) + carried;
}

function stepsBack(
  circuit: Circuit,
  came: Int32Array,
  start: number,
  end: number,
  each: (index: number, fromA: boolean) => void,
) {
  let at = end;
  for (let guard = 0; at !== start && guard < came.length; guard++) {
    const index = came[at] ?? -1;
    const link = circuit.links[index];
    if (link === undefined) return;
    const fromA = link.b === at;
    each(index, fromA);
    at = fromA ? link.a : link.b;
  }
}

function smallestResidual(
  circuit: Circuit,
  came: Int32Array,
  start: number,
  end: number,
  network: Network,
  flow: Float64Array,
): number {
  let step = UNLIMITED;
  stepsBack(circuit, came, start, end, (index, fromA) => {
    step = Math.min(step, residual(fromA, index, network, flow));
  });
  return step;
}

function push(
  circuit: Circuit,
  came: Int32Array,
  start: number,
  end: number,
  flow: Float64Array,
  step: number,
) {
  stepsBack(circuit, came, start, end, (index, fromA) => {
    flow[index] = (flow[index] ?? 0) + (fromA ? step : -step);
  });
}

function crossing(circuit: Circuit, came: Int32Array, { ahead, back }: Network, skip: number): string[] {
  const inside = (node: number) => came[node] !== -1;
  const devices = circuit.links.flatMap((link, index) => {
    if (index === skip) return [];
    const cut = inside(link.a)
      ? !inside(link.b) && (ahead[index] ?? 0) > 0
      : inside(link.b) && (back[index] ?? 0) > 0;
    return cut && link.element !== null ? [link.element] : [];
  });
  return [...new Set(devices)];
}
