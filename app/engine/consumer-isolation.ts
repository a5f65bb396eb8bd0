import type { ConsumerIsolation, ConsumerPole } from "./analysis";
import type { Circuit, Link, Supply } from "./circuit";
import { conduction, configurations, isReached, passes, walk, type Position, type Reach } from "./energise";

const usingKinds = new Set([
  "load",
  "fan",
  "outlet",
  "isolated-supply",
  "transformer",
  "charger",
  "converter",
]);

/** Links across which energy is used or passed on. Lamps are left out: one before a switch does not undo what it does. */
export function usingLinks(circuit: Circuit): Link[] {
  return circuit.links.filter(({ kind, element }) => {
    const found = element === null ? undefined : circuit.view.elements.get(element);
    return kind === "consumer" && found !== undefined && usingKinds.has(found.kind);
  });
}

type Pole = "hot" | "ret";
type Positions = ReadonlyMap<string, Position>;

/** How a pole comes to a consumer: not at all, plainly (nothing passed), or over the parts named. */
type Access = string[] | null;

/**
 * What of a mains source each consumer is parted from by each switch. A pole that is plainly broken and still comes to the
 * consumer over a capacitor, resistor, lamp or load is told with those parts. When nothing else uses the mains, lamps count.
 */
export function consumerIsolation(circuit: Circuit, source: Supply): ConsumerIsolation[] {
  const lamps = circuit.links.filter(
    ({ kind, element }) =>
      kind === "consumer" && circuit.view.elements.get(element ?? "")?.kind === "indicator",
  );
  const found = consumersAmong(circuit, source, usingLinks(circuit));
  return found.length > 0 ? found : consumersAmong(circuit, source, lamps);
}

function consumersAmong(circuit: Circuit, source: Supply, consumers: Link[]): ConsumerIsolation[] {
  const normal = settings(circuit, source, null);
  const reached = consumers.filter((each) =>
    normal.some((setting) => setting.access("hot", each) !== null || setting.access("ret", each) !== null),
  );
  if (reached.length === 0) return [];
  const off = new Map(circuit.switches.map(({ id }) => [id, settings(circuit, source, [id])]));
  const hands = circuit.switches.filter(({ actuator }) => actuator === "hand").map(({ id }) => id);
  const handsOff = settings(circuit, source, hands);
  return reached.map((link) => {
    const poles = (["hot", "ret"] as const).map((pole): ConsumerPole => {
      const isPlain = normal.some((setting) => setting.access(pole, link)?.length === 0);
      const inUse = isPlain || normal.some((setting) => setting.access(pole, link) !== null);
      const parted = (those: Setting[]) => {
        const accesses = those.flatMap((setting) => setting.access(pole, link) ?? []);
        const any = those.some((setting) => setting.access(pole, link) !== null);
        const plainly = those.some((setting) => setting.access(pole, link)?.length === 0);
        return { open: !any || (isPlain && !plainly), past: any ? [...new Set(accesses)] : [] };
      };
      const broken = inUse
        ? [...off].flatMap(([id, those]) => {
            const { open, past } = parted(those);
            return open ? [{ switch: id, past }] : [];
          })
        : [];
      return {
        pole: pole === "hot" ? "L" : "N",
        inUse,
        brokenBy: broken.map((each) => each.switch),
        past: broken
          .filter(({ past }) => past.length > 0)
          .map((each) => ({ switch: each.switch, through: each.past })),
        partedByHand: inUse && parted(handsOff).open,
      };
    });
    return { consumer: link.element ?? "", poles };
  });
}

interface Setting {
  access(pole: Pole, consumer: Link): Access;
}

/** Every setting of the changeovers, with some switches off and all others on. */
function settings(circuit: Circuit, source: Supply, off: string[] | null): Setting[] {
  return configurations(circuit, (id) => (off?.includes(id) === true ? "off" : null)).map((positions) =>
    settingOf(circuit, source, positions),
  );
}

function settingOf(circuit: Circuit, source: Supply, positions: Positions): Setting {
  const conducts = conduction(circuit, { positions, includePossible: true });
  const plain = {
    hot: walk(circuit, conducts, source.hot, "either"),
    ret: walk(circuit, conducts, source.ret, "either"),
  };
  const over: Partial<Record<Pole, ReadonlyMap<number, string[]>>> = {};
  return {
    access(pole, { a, b }) {
      if (isReached(plain[pole], a) || isReached(plain[pole], b)) return [];
      const other = pole === "hot" ? plain.ret : plain.hot;
      const beyond = (over[pole] ??= reachOver(circuit, conducts, plain[pole], other));
      return beyond.get(a) ?? beyond.get(b) ?? null;
    },
  };
}

/** Nodes that a pole comes to over loads, lamps, capacitors and resistors, with those; the other pole's nodes stop it. */
function reachOver(
  circuit: Circuit,
  conducts: Uint8Array,
  own: Reach,
  other: Reach,
): ReadonlyMap<number, string[]> {
  const beyond = new Map<number, string[]>();
  const queue: number[] = [];
  for (let node = 0; node < own.length; node++) if (isReached(own, node)) queue.push(node);
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head] ?? -1;
    const way = beyond.get(node) ?? [];
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined) continue;
      const isPart = link.kind === "consumer" || link.kind === "shunt";
      if (!isPart && !passes(link, conducts[index] ?? 0, node, "either")) continue;
      const next = link.a === node ? link.b : link.a;
      if (isReached(own, next) || isReached(other, next) || beyond.has(next)) continue;
      beyond.set(next, isPart && link.element !== null ? [...way, link.element] : way);
      queue.push(next);
    }
  }
  return beyond;
}
