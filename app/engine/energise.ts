import type { Certainty } from "./analysis";
import type { Circuit, Link, Supply, Transfer } from "./circuit";

/** "any": every contact counts as closed, which is only meaningful for on-off contacts. */
export type Position = "on" | "off" | "any";

export interface Condition {
  /** Position of each switch; one that is not named counts as "on". */
  positions: ReadonlyMap<string, Position>;
  /** A part that has failed short: it conducts both ways, and a converter passes energy backwards. */
  failedShort?: string | null;
  /** Elements that pass no energy on in this question. */
  idle?: ReadonlySet<string>;
  /** Count links and transfers that are not sure as conducting. */
  includePossible: boolean;
}

const UNREACHED = -1;
const START = -2;

/** For each node the link by which it was reached: -1 not at all, -2 where the walk began. */
export type Reach = Int32Array;

/** One pair of energised poles: a source itself, or the output of something that it feeds. */
export interface Instance {
  supply: Supply;
  /** `null` for the source itself. */
  parent: { instance: Instance; transfer: Transfer } | null;
  hot: Reach;
  ret: Reach;
}

export interface Energised {
  source: Supply;
  instances: Instance[];
  conducts: Uint8Array;
}

const NONE = 0;
const FORWARD = 1;
const BOTH = 2;

/** Which way each link conducts under a condition: 0 not, 1 from a to b, 2 both ways. Consumers and shunts never do here. */
export function conduction(circuit: Circuit, condition: Condition): Uint8Array {
  return Uint8Array.from(circuit.links, (link) => {
    if (link.kind === "consumer" || link.kind === "shunt") return NONE;
    if (link.element !== null && link.element === condition.failedShort) return BOTH;
    if (link.certainty === "possible" && !condition.includePossible) return NONE;
    if (link.kind === "contact") {
      const position = link.element === null ? "on" : (condition.positions.get(link.element) ?? "on");
      return position === "any" || position === link.closedWhen ? BOTH : NONE;
    }
    return link.direction === "both" ? BOTH : FORWARD;
  });
}

/** With the current, against it, or both where voltage alternates and a diode passes half of each wave. */
export type Sense = "with" | "against" | "either";

/** Walks from a node along conducting links. */
export function walk(circuit: Circuit, conducts: Uint8Array, start: number, sense: Sense): Reach {
  const reach = new Int32Array(circuit.view.nodeCount).fill(UNREACHED);
  if (start < 0) return reach;
  reach[start] = START;
  const queue = [start];
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head];
    if (node === undefined) break;
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || !passes(link, conducts[index] ?? NONE, node, sense)) continue;
      const next = link.a === node ? link.b : link.a;
      if (reach[next] !== UNREACHED) continue;
      reach[next] = index;
      queue.push(next);
    }
  }
  return reach;
}

/** Whether a link lets a walk leave a node, given how it conducts. */
export function passes(link: Link, way: number, node: number, sense: Sense): boolean {
  if (way === NONE) return false;
  if (way === BOTH || sense === "either") return true;
  return sense === "against" ? link.b === node : link.a === node;
}

export const isReached = (reach: Reach, node: number): boolean =>
  node >= 0 && (reach[node] ?? UNREACHED) !== UNREACHED;

/** Everything that one source energises, alone, under a condition: itself and each supply, charger or converter it feeds. */
export function energise(
  circuit: Circuit,
  source: Supply,
  condition: Condition,
  conducts: Uint8Array = conduction(circuit, condition),
): Energised {
  const make = (supply: Supply, parent: Instance["parent"]): Instance => ({
    supply,
    parent,
    hot: walk(circuit, conducts, supply.hot, supply.domain === "dc" ? "with" : "either"),
    ret: walk(circuit, conducts, supply.ret, supply.domain === "dc" ? "against" : "either"),
  });
  const instances = [make(source, null)];
  const used = new Set<string>();
  for (let index = 0; index < instances.length; index++) {
    const instance = instances[index];
    if (instance === undefined) break;
    for (const transfer of transfersUnder(circuit, condition)) {
      const key = `${transfer.mode} ${transfer.element}`;
      if (used.has(key) || cameThrough(instance, transfer.element) || !feeds(instance, transfer)) continue;
      used.add(key);
      instances.push(make(transfer.to, { instance, transfer }));
    }
  }
  return { source, instances, conducts };
}

function transfersUnder(circuit: Circuit, condition: Condition): Transfer[] {
  const active = circuit.transfers.filter(
    ({ element, certainty }) =>
      !condition.idle?.has(element) && (certainty === "certain" || condition.includePossible),
  );
  const failed = condition.failedShort;
  const forward = circuit.transfers.find(({ element, mode }) => element === failed && mode === "forward");
  if (forward === undefined) return active;
  return [
    ...active,
    { ...forward, mode: "backward", certainty: "certain", from: forward.to, to: forward.from },
  ];
}

/** The element lies on the instance's own way from the source. */
export function cameThrough(instance: Instance, element: string): boolean {
  for (let step = instance.parent; step !== null; step = step.instance.parent) {
    if (step.transfer.element === element) return true;
  }
  return false;
}

function feeds({ supply, hot, ret }: Instance, { from }: Transfer): boolean {
  const straight = isReached(hot, from.hot) && isReached(ret, from.ret);
  if (supply.domain === "dc") return straight && from.domain === "dc";
  return straight || (isReached(hot, from.ret) && isReached(ret, from.hot));
}

export interface Way {
  /** Elements passed, in order, without the source. */
  elements: string[];
  conductors: string[];
}

/** The way from the source to a node of an instance, on its hot or return pole. */
export function wayTo(circuit: Circuit, instance: Instance, node: number, pole: "hot" | "ret"): Way {
  const before: Way =
    instance.parent === null
      ? { elements: [], conductors: [] }
      : wayThroughParent(circuit, instance.parent.instance, instance.parent.transfer);
  const inside = wayWithin(circuit, instance[pole], node);
  return {
    elements: withoutRepeats([...before.elements, ...inside.elements]),
    conductors: [...before.conductors, ...inside.conductors],
  };
}

function wayThroughParent(circuit: Circuit, parent: Instance, transfer: Transfer): Way {
  const onHot = isReached(parent.hot, transfer.from.hot);
  const way = wayTo(circuit, parent, onHot ? transfer.from.hot : transfer.from.ret, "hot");
  return { ...way, elements: [...way.elements, transfer.element] };
}

/** The way of a walk to a node that it came to. */
export function wayWithin(circuit: Circuit, reach: Reach, node: number): Way {
  const elements: string[] = [];
  const conductors: string[] = [];
  let at = node;
  for (let guard = 0; guard <= reach.length; guard++) {
    const index = reach[at] ?? UNREACHED;
    const link = index >= 0 ? circuit.links[index] : undefined;
    if (link === undefined) break;
    if (link.conductor !== null) conductors.push(link.conductor);
    if (link.element !== null) elements.push(link.element);
    at = link.a === at ? link.b : link.a;
  }
  return { elements: elements.reverse(), conductors: conductors.reverse() };
}

const withoutRepeats = (ids: string[]) => ids.filter((id, index) => id !== ids[index - 1]);

/** Up to so many changeovers are worked out in every combination. */
const completeUpTo = 6;

export interface Settings {
  positions: Map<string, Position>[];
  /** Changeovers of which not every combination with the others was worked out; empty when all were. */
  left: string[];
}

/**
 * Positions of all switches: on-off contacts in one given position, each changeover in every combination. A changeover of
 * which one side is joined to nothing stays on the other, since its bare side only ever joins less. With more than six that
 * matter, or more than `most` settings, only both extremes and each one thrown alone are given, and `left` names them.
 */
export function settingsOf(
  circuit: Circuit,
  positionOf: (id: string) => Position | null,
  most = 2 ** completeUpTo,
): Settings {
  const base = new Map<string, Position>();
  const free: string[] = [];
  for (const element of circuit.switches) {
    const only =
      positionOf(element.id) ?? (element.throw === "single" ? "on" : onlySide(circuit, element.id));
    if (only !== null) base.set(element.id, only);
    else free.push(element.id);
  }
  const complete = free.length <= completeUpTo && 2 ** free.length <= most;
  const off = complete ? everySubset(free) : fewSubsets(free);
  return {
    positions: off.map((each) => {
      const positions = new Map(base);
      for (const id of free) positions.set(id, each.has(id) ? "off" : "on");
      return positions;
    }),
    left: complete ? [] : free,
  };
}

/** As `settingsOf`, the positions alone. */
export const configurations = (
  circuit: Circuit,
  positionOf: (id: string) => Position | null,
): Map<string, Position>[] => settingsOf(circuit, positionOf).positions;

/** Changeovers of which not every position together with the others is worked out, with everything else switched on. */
export const uncheckedChangeovers = (circuit: Circuit): string[] => settingsOf(circuit, () => null).left;

/** The one position that matters of a changeover whose other side leads nowhere; `null` when both do matter. */
function onlySide(circuit: Circuit, id: string): Position | null {
  const leads = (position: "on" | "off") =>
    circuit.links.some(
      ({ element, closedWhen, b }) =>
        element === id && closedWhen === position && (circuit.linksAt[b]?.length ?? 0) > 1,
    );
  if (!leads("off")) return "on";
  return leads("on") ? null : "off";
}

const everySubset = (ids: string[]): Set<string>[] =>
  Array.from(
    { length: 2 ** ids.length },
    (_, bits) => new Set(ids.filter((_id, index) => (bits >> index) & 1)),
  );

const fewSubsets = (ids: string[]): Set<string>[] => [
  new Set(),
  new Set(ids),
  ...ids.map((id) => new Set([id])),
  ...ids.map((kept) => new Set(ids.filter((id) => id !== kept))),
];

/** The poorer of two certainties. */
export const poorer = (a: Certainty, b: Certainty): Certainty =>
  a === "possible" || b === "possible" ? "possible" : "certain";
