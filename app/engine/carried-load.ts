import type { Circuit, Link } from "./circuit";
import { earthTerminals } from "./earth-net";
import { isReached, passes, type Reach, type Sense } from "./energise";
import type { Element } from "./energy-map";
import type { Feed } from "./feeds";
import { leadsTo } from "./series-loads";
import type { UnitFacts } from "./unit-facts";

/** Both ends of a link lie on the same pole of the feeding supply: its current can pass there. */
export const carries = ({ instance }: Feed, { a, b }: Link) =>
  (isReached(instance.hot, a) && isReached(instance.hot, b)) ||
  (isReached(instance.ret, a) && isReached(instance.ret, b));

/** Largest steady current that an element draws from what feeds it, A. `null`: not known. */
export function drawOf(element: Element, facts: UnitFacts, supplyLimit: number | null): number | null {
  switch (element.kind) {
    case "load":
    case "fan":
    case "indicator":
      return element.amps;
    case "outlet":
      return element.maxAmps;
    case "isolated-supply":
    case "charger":
    case "converter":
      return element.inputAmps;
    case "transformer":
      return element.voltAmperes === null ? null : element.voltAmperes / facts.supplyVolts;
    case "battery":
      return supplyLimit;
    default:
      return 0;
  }
}

/** Known and complete, or only what is known of it. */
export interface CarriedLoad {
  amps: number;
  complete: boolean;
}

/** Current of everything that is fed through a link, A: what is known of it, and whether something is not known. */
export function loadThrough(circuit: Circuit, feed: Feed, index: number, facts: UnitFacts): CarriedLoad {
  const { instance, conducts } = feed;
  const link = circuit.links[index];
  if (link === undefined) return { amps: 0, complete: false };
  const onHot = isReached(instance.hot, link.a);
  const reach = onHot ? instance.hot : instance.ret;
  const far = reach[link.a] === index ? link.a : link.b;
  const sense = instance.supply.domain === "dc" ? (onHot ? "with" : "against") : "either";
  const beyond = reachWithout(circuit, conducts, far, index, sense);
  const opposite = onHot ? instance.ret : instance.hot;
  let amps = 0;
  let complete = true;
  const counted = new Set<string>();
  for (const { kind, element, a, b } of circuit.links) {
    if (
      kind !== "consumer" ||
      element === null ||
      element === instance.supply.element ||
      counted.has(element)
    )
      continue;
    const fed = (beyond.has(a) && isReached(opposite, b)) || (beyond.has(b) && isReached(opposite, a));
    const found = circuit.view.elements.get(element);
    if (found === undefined) continue;
    if (!fed) {
      // Current goes on through something else, in series or by earth: how much is not worked out.
      if (goesOn(circuit, feed, element, beyond, opposite, a, b)) complete = false;
      continue;
    }
    counted.add(element);
    const draw = drawOf(found, facts, feed.limitAmps);
    if (draw === null || !Number.isFinite(draw)) complete = false;
    else amps += draw;
  }
  const limit = feed.limitAmps;
  const isRoot = instance.parent === null;
  if (!isRoot && limit !== null && Number.isFinite(limit) && amps > limit)
    return { amps: limit, complete: true };
  return { amps, complete };
}

/** One end of a load hangs on what is fed, and from its other end current can find the way back. */
function goesOn(
  circuit: Circuit,
  { instance, conducts }: Feed,
  element: string,
  beyond: ReadonlySet<number>,
  opposite: Reach,
  a: number,
  b: number,
): boolean {
  if (beyond.has(a) === beyond.has(b)) return false;
  const far = beyond.has(a) ? b : a;
  if (isReached(instance.hot, far) || isReached(instance.ret, far)) return false;
  const isEarth = (node: number) => instance.supply.domain === "mains" && isEarthTerminal(circuit, node);
  return leadsTo(circuit, conducts, far, element, (node) => isReached(opposite, node) || isEarth(node));
}

const isEarthTerminal = ({ view }: Circuit, node: number): boolean =>
  earthTerminals(view).some((each) => each.node === node);

function reachWithout(
  circuit: Circuit,
  conducts: Uint8Array,
  start: number,
  skip: number,
  sense: Sense,
): Set<number> {
  const seen = new Set([start]);
  const queue = [start];
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head];
    if (node === undefined) break;
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || index === skip || !passes(link, conducts[index] ?? 0, node, sense)) continue;
      const next = link.a === node ? link.b : link.a;
      if (seen.has(next)) continue;
      seen.add(next);
      queue.push(next);
    }
  }
  return seen;
}
