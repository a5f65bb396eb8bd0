import type { Circuit } from "./circuit";
import { isReached, passes, type Instance } from "./energise";
import type { ElementOf } from "./energy-map";

/** A part that lets mains through without being a plain joint. */
interface Crossing {
  element: string;
  a: number;
  b: number;
}

export interface CrossingRules {
  conducts: Uint8Array;
  includePossible: boolean;
  earthed: ReadonlySet<number>;
  /** Nodes at which a finding is told, and behind which nothing more is looked for. */
  isEnd(node: number): boolean;
  /** The neutral is joined with earth on purpose, so that it is no pole to be kept away. */
  neutralEarthed: boolean;
}

/**
 * Nodes that mains reaches through loads, lamps, resistors and capacitors, each with those parts in order. A Y1 capacitor may
 * bridge double insulation and is not crossed; a Y2 capacitor bridges basic insulation, so one may lead to earth and two in a
 * row to anything (IEC 60384-14, from memory). Every other capacitor is crossed, one of unknown class when doubts count.
 */
export function reachThroughParts(
  circuit: Circuit,
  instance: Instance,
  rules: CrossingRules,
): Map<number, string[]> {
  const capacitors = circuit.view.ofKind("y-capacitor");
  const crossed = new Map<number, string[]>();
  const isPole = (node: number) => isReached(instance.hot, node) || isReached(instance.ret, node);
  const starts: number[] = [];
  for (let node = 0; node < circuit.view.nodeCount; node++) {
    const counts = rules.neutralEarthed ? isReached(instance.hot, node) : isPole(node);
    if (counts) starts.push(node);
  }
  const plain = crossingsOf(circuit, capacitors.filter(isCrossed(rules.includePossible)));
  const walk = (from: number[]) => spread(circuit, rules, isPole, plain, from, crossed);
  walk(starts);

  const second = capacitors.filter(({ safetyClass }) => safetyClass === "Y2");
  const level: number[] = [];
  const before = [...starts, ...[...crossed.keys()].filter((node) => !rules.isEnd(node))];
  for (const { element, a, b } of crossingsOf(circuit, second)) {
    for (const [near, far] of [
      [a, b],
      [b, a],
    ] as const) {
      if (!before.includes(near) || rules.earthed.has(far) || isPole(far) || crossed.has(far)) continue;
      crossed.set(far, [...(crossed.get(near) ?? []), element]);
      level.push(far);
    }
  }
  walk(level.filter((node) => !rules.isEnd(node)));
  return crossed;
}

const isCrossed =
  (includePossible: boolean) =>
  ({ safetyClass }: ElementOf<"y-capacitor">) =>
    safetyClass === "none" || (safetyClass === "unknown" && includePossible);

function crossingsOf(circuit: Circuit, capacitors: ElementOf<"y-capacitor">[]): Crossing[] {
  return capacitors.map(({ id }) => ({
    element: id,
    a: circuit.view.nodeOf(id, "1"),
    b: circuit.view.nodeOf(id, "2"),
  }));
}

function spread(
  circuit: Circuit,
  rules: CrossingRules,
  isPole: (node: number) => boolean,
  capacitors: Crossing[],
  from: number[],
  crossed: Map<number, string[]>,
) {
  const queue = [...from];
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head] ?? -1;
    const way = crossed.get(node) ?? [];
    const go = (next: number, element: string | null) => {
      if (isPole(next) || crossed.has(next)) return;
      crossed.set(next, element === null ? way : [...way, element]);
      if (!rules.isEnd(next)) queue.push(next);
    };
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined) continue;
      const next = link.a === node ? link.b : link.a;
      if (link.kind === "consumer" || link.kind === "shunt") go(next, link.element);
      else if (passes(link, rules.conducts[index] ?? 0, node, "either")) go(next, null);
    }
    for (const { element, a, b } of capacitors) {
      if (a === node) go(b, element);
      else if (b === node) go(a, element);
    }
  }
}
