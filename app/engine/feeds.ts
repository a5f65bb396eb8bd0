import type { Circuit, Supply } from "./circuit";
import { energise, isReached, settingsOf, type Instance, type Position, type Settings } from "./energise";
import { largestFlow, networkOf, type Flow, type Network, type Work } from "./flow";
import { reachThroughLoads } from "./live";
import { suppliedLimit } from "./supply-data";
import type { UnitFacts } from "./unit-facts";

/** What can flow, by plain conductors and devices alone, and through loads too. */
interface Networks {
  plain: Network;
  loads: Network;
}

/** One feeding supply under one set of switch positions, with what is needed to ask for flows. */
export interface Feed {
  instance: Instance;
  /** A mains inlet with its poles exchanged, as when the plug is put in the other way round. */
  reversed: boolean;
  conducts: Uint8Array;
  /** What it reaches through loads, as from `reachThroughLoads`. */
  through: Int32Array;
  /** Reached only if something that is not known is so. */
  doubtful: boolean;
  /** What the supply can give for long, A; `null`: not known. */
  limitAmps: number | null;
  /** A device whose rating is not known counts as letting everything through. */
  high: Networks;
  /** The same device counts as letting nothing through, the least that it could; `null` when every rating is known. */
  low: Networks | null;
}

/** Settings times conductors that are worked out at most. */
const workAtMost = 6000;

/** The settings that fusing is judged in, and the changeovers of which some are left out. */
export const feedSettings = (circuit: Circuit): Settings =>
  settingsOf(
    circuit,
    () => null,
    Math.max(1, Math.floor(workAtMost / Math.max(1, circuit.view.wired.length))),
  );

const cache = new WeakMap<Circuit, { facts: UnitFacts; feeds: Feed[] }>();

/**
 * Every supply with everything switched on, each changeover in each position. Where a plug may be put in the other way round,
 * its inlet once more with the poles exchanged.
 */
export function feedsOf(circuit: Circuit, facts: UnitFacts): Feed[] {
  const known = cache.get(circuit);
  if (known?.facts === facts) return known.feeds;
  const capacities = deviceCapacities(circuit);
  const feeds = feedSettings(circuit).positions.flatMap((positions) =>
    circuit.sources.flatMap((source) => [
      ...feedsFrom(circuit, source, positions, false, capacities, facts),
      ...(mayBeReversed(circuit, source)
        ? feedsFrom(
            circuit,
            { ...source, hot: source.ret, ret: source.hot },
            positions,
            true,
            capacities,
            facts,
          )
        : []),
    ]),
  );
  cache.set(circuit, { facts, feeds });
  return feeds;
}

/** Steps of search for what limits each conductor's current, over a whole map. */
const stepsAtMost = 2_000_000;

/** The same feeds with all steps of the search before them, so that the same question always gets the same answer. */
export function restart(feeds: Feed[]): Feed[] {
  for (const { high } of feeds) high.plain.work.steps = stepsAtMost;
  return feeds;
}

/** The search for limits was given up: what it has not come to is not known. */
export const isExhausted = ({ high }: Feed): boolean => high.plain.work.steps <= 0;

function mayBeReversed({ view }: Circuit, { element }: Supply): boolean {
  const found = view.elements.get(element);
  return found?.kind === "mains-inlet" && found.polarised !== "yes";
}

interface Capacities {
  highest: Map<string, number>;
  lowest: Map<string, number>;
  allKnown: boolean;
  work: Work;
}

function deviceCapacities({ view }: Circuit): Capacities {
  const devices = [...view.ofKind("fuse"), ...view.ofKind("breaker")];
  return {
    highest: new Map(devices.map(({ id, ratingAmps }) => [id, ratingAmps ?? Infinity])),
    lowest: new Map(devices.map(({ id, ratingAmps }) => [id, ratingAmps ?? 0])),
    allKnown: devices.every(({ ratingAmps }) => ratingAmps !== null),
    work: { steps: stepsAtMost },
  };
}

/** A source and what it feeds through stages; of a reversed inlet itself alone, since behind a stage nothing changes. */
function feedsFrom(
  circuit: Circuit,
  source: Supply,
  positions: Map<string, Position>,
  reversed: boolean,
  { highest, lowest, allKnown, work }: Capacities,
  facts: UnitFacts,
): Feed[] {
  const { instances, conducts } = energise(circuit, source, { positions, includePossible: true });
  const feeds: Feed[] = [];
  for (const instance of reversed ? instances.slice(0, 1) : instances) {
    const parent = feeds.find((each) => each.instance === instance.parent?.instance);
    feeds.push({
      instance,
      reversed,
      conducts,
      through: reachThroughLoads(circuit, instance, conducts),
      doubtful: parent?.doubtful === true || instance.parent?.transfer.certainty === "possible",
      limitAmps: suppliedLimit(
        circuit.view,
        instance,
        facts,
        parent === undefined ? null : feedAmps(circuit, parent, instance),
      ),
      high: networksOf(circuit, instance, conducts, highest, work),
      low: allKnown ? null : networksOf(circuit, instance, conducts, lowest, work),
    });
  }
  return feeds;
}

function networksOf(
  circuit: Circuit,
  { supply, hot, ret }: Instance,
  conducts: Uint8Array,
  capacities: Map<string, number>,
  work: Work,
): Networks {
  const make = (throughLoads: boolean) =>
    networkOf(circuit, {
      conducts,
      throughLoads,
      exceptElement: supply.element,
      isHot: (node) => isReached(hot, node),
      isReturn: (node) => isReached(ret, node),
      capacities,
      work,
    });
  return { plain: make(false), loads: make(true) };
}

/** What the devices before a stage let into it, A. */
function feedAmps(circuit: Circuit, parent: Feed, { parent: step }: Instance): number | null {
  if (step === null) return null;
  const { hot, supply } = parent.instance;
  const node = isReached(hot, step.transfer.from.hot) ? step.transfer.from.hot : step.transfer.from.ret;
  return withLimit(parent, largestFlow(circuit, parent.high.plain, supply.hot, node, -1).amps).amps;
}

/** A flow held down by what the supply itself can give. */
export function withLimit(
  { limitAmps, instance }: Feed,
  amps: number,
): { amps: number | null; bySupply: string[] } {
  if (limitAmps === null) return { amps: Number.isFinite(amps) ? amps : null, bySupply: [] };
  return limitAmps <= amps
    ? { amps: limitAmps, bySupply: Number.isFinite(limitAmps) ? [instance.supply.element] : [] }
    : { amps, bySupply: [] };
}

export interface Limits {
  /** What can flow into a conductor from the supply's side, A. */
  into: Flow;
  /** What can flow on from its far end, A; worked out when asked for. */
  onward: () => Flow;
}

export type Side = "hot" | "return" | "between";

/** On which side of the loads a node lies; `null` when the supply does not reach it. */
export function sideOf({ instance, through }: Feed, node: number): Side | null {
  if (isReached(instance.hot, node)) return "hot";
  if (isReached(instance.ret, node)) return "return";
  return isReached(through, node) ? "between" : null;
}

const larger = (flows: Flow[]): Flow =>
  flows.reduce((most, each) => (each.amps > most.amps ? each : most), { amps: 0, devices: [] });

/**
 * What can flow through one conductor, given the index of its link. On the hot side a fault may be anywhere along it, so all
 * that reaches its near end counts; on the return side only what comes through loads does.
 */
export function limitsOf(
  circuit: Circuit,
  feed: Feed,
  networks: Networks,
  index: number,
  side: Side,
): Limits {
  const link = circuit.links[index];
  const { supply, hot, ret } = feed.instance;
  if (link === undefined)
    return { into: { amps: Infinity, devices: [] }, onward: () => ({ amps: Infinity, devices: [] }) };
  const near = nearEnds(side === "hot" ? hot : ret, index, link.a, link.b);
  const far = near.length === 1 ? [near[0] === link.a ? link.b : link.a] : near;
  const fromHot = (node: number) =>
    largestFlow(circuit, side === "hot" ? networks.plain : networks.loads, supply.hot, node, index);
  const toReturn = (node: number) => largestFlow(circuit, networks.loads, node, supply.ret, index);
  return side === "hot"
    ? { into: larger(near.map(fromHot)), onward: () => larger(far.map(toReturn)) }
    : { into: larger(far.map(fromHot)), onward: () => larger(near.map(toReturn)) };
}

/** The end of a conductor that a walk from a pole came to first; both when it closes a loop. */
function nearEnds(reach: Int32Array, index: number, a: number, b: number): number[] {
  if (reach[b] === index) return [a];
  if (reach[a] === index) return [b];
  return [a, b];
}
