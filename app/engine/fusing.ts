import type { ConductorProtection, FusingResult } from "./analysis";
import type { Circuit } from "./circuit";
import { ampacityOf } from "./conductor-data";
import { configurations, energise, isReached, type Instance } from "./energise";
import type { Conductor } from "./energy-map";
import { contactReports, deviceReports } from "./fusing-devices";
import { largestFlow, type Flow } from "./flow";
import { figure } from "./figure";
import { reachThroughLoads } from "./live";
import { suppliedLimit } from "./supply-data";
import type { UnitFacts } from "./unit-facts";

/** One feeding supply under one set of switch positions, with what is needed to ask for flows. */
export interface Feed {
  instance: Instance;
  conducts: Uint8Array;
  /** What it reaches through loads, as from `reachThroughLoads`. */
  through: Int32Array;
  /** Reached only if something that is not known is so. */
  doubtful: boolean;
  /** What the supply can give for long, A; `null`: not known. */
  limitAmps: number | null;
}

/** For each conductor and supply what protects it, and for each device whether it suits load, fault current and voltage. */
export function analyseFusing(circuit: Circuit, facts: UnitFacts): FusingResult {
  const feeds = feedsOf(circuit, facts);
  const conductors = worstOf(
    feeds.flatMap((feed) =>
      circuit.view.wired.flatMap((conductor) => {
        const found = protectionOf(circuit, feed, conductor);
        return found === null ? [] : [found];
      }),
    ),
  );
  return {
    conductors,
    devices: deviceReports(circuit, feeds, conductors, facts),
    contacts: contactReports(circuit, feeds, facts),
  };
}

/** Every supply with everything switched on, each changeover in each position. */
function feedsOf(circuit: Circuit, facts: UnitFacts): Feed[] {
  return configurations(circuit, () => null).flatMap((positions) =>
    circuit.sources.flatMap((source) => {
      const energised = energise(circuit, source, { positions, includePossible: true });
      const feeds: Feed[] = [];
      for (const instance of energised.instances) {
        const parent = feeds.find((each) => each.instance === instance.parent?.instance);
        feeds.push({
          instance,
          conducts: energised.conducts,
          through: reachThroughLoads(circuit, instance, energised.conducts),
          doubtful: parent?.doubtful === true || instance.parent?.transfer.certainty === "possible",
          limitAmps: suppliedLimit(
            circuit.view,
            instance,
            facts,
            parent === undefined ? null : feedAmps(circuit, parent, instance),
          ),
        });
      }
      return feeds;
    }),
  );
}

/** What the devices before a stage let into it, A. */
function feedAmps(circuit: Circuit, parent: Feed, { parent: step }: Instance): number | null {
  if (step === null) return null;
  const onHot = isReached(parent.instance.hot, step.transfer.from.hot);
  const node = onHot ? step.transfer.from.hot : step.transfer.from.ret;
  const { amps } = flowFromHot(circuit, parent, node, -1, false, highCapacities(circuit));
  return withLimit(parent, amps).amps;
}

function withLimit({ limitAmps, instance }: Feed, amps: number): { amps: number | null; bySupply: string[] } {
  if (limitAmps === null) return { amps: Number.isFinite(amps) ? amps : null, bySupply: [] };
  return limitAmps <= amps
    ? { amps: limitAmps, bySupply: Number.isFinite(limitAmps) ? [instance.supply.element] : [] }
    : { amps, bySupply: [] };
}

/** Rating of each fuse and breaker; one that is not known counts as letting everything through. */
function highCapacities(circuit: Circuit): Map<string, number> {
  return new Map(protectors(circuit).map(({ id, ratingAmps }) => [id, ratingAmps ?? Infinity]));
}
/** As above, but one that is not known lets nothing through: the smallest that it could be. */
function lowCapacities(circuit: Circuit): Map<string, number> {
  return new Map(protectors(circuit).map(({ id, ratingAmps }) => [id, ratingAmps ?? 0]));
}
const protectors = ({ view }: Circuit) => [...view.ofKind("fuse"), ...view.ofKind("breaker")];

function flowFromHot(
  circuit: Circuit,
  { instance, conducts }: Feed,
  end: number,
  skip: number,
  throughLoads: boolean,
  capacities: Map<string, number>,
): Flow {
  return largestFlow(circuit, {
    start: instance.supply.hot,
    end,
    conducts,
    throughLoads,
    exceptElement: instance.supply.element,
    isHot: (node) => isReached(instance.hot, node),
    isReturn: (node) => isReached(instance.ret, node),
    skip,
    capacities,
  });
}

interface Limits {
  /** What can flow into it from the supply's side, A. */
  into: Flow;
  /** What can flow on from its far end, A; `null` where that protects nothing. */
  onward: Flow | null;
}

type Side = "hot" | "return" | "between";

function sideOf({ instance, through }: Feed, node: number): Side | null {
  if (isReached(instance.hot, node)) return "hot";
  if (isReached(instance.ret, node)) return "return";
  return isReached(through, node) ? "between" : null;
}

function protectionOf(circuit: Circuit, feed: Feed, conductor: Conductor): ConductorProtection | null {
  if (conductor.circuit === "earth") return null;
  const index = circuit.links.findIndex((link) => link.conductor === conductor.id);
  const link = circuit.links[index];
  if (link === undefined) return null;
  const side = sideOf(feed, link.a);
  if (side === null) return null;
  const ask = (capacities: Map<string, number>): Limits =>
    side === "hot"
      ? hotLimits(circuit, feed, index, capacities)
      : returnLimits(circuit, feed, index, capacities);
  const high = ask(highCapacities(circuit));
  const low = protectors(circuit).some(({ ratingAmps }) => ratingAmps === null)
    ? ask(lowCapacities(circuit))
    : high;
  return judge(circuit, feed, conductor, side, high, low);
}

/** The end of a conductor that a walk from a pole came to first; both when it closes a loop. */
function nearEnds(reach: Int32Array, index: number, a: number, b: number): number[] {
  if (reach[b] === index) return [a];
  if (reach[a] === index) return [b];
  return [a, b];
}

const larger = (flows: Flow[]): Flow =>
  flows.reduce((most, each) => (each.amps > most.amps ? each : most), { amps: 0, devices: [] });

function hotLimits(circuit: Circuit, feed: Feed, index: number, capacities: Map<string, number>): Limits {
  const link = circuit.links[index];
  if (link === undefined) return { into: { amps: Infinity, devices: [] }, onward: null };
  const near = nearEnds(feed.instance.hot, index, link.a, link.b);
  const far = near.length === 1 ? [near[0] === link.a ? link.b : link.a] : near;
  return {
    into: larger(near.map((node) => flowFromHot(circuit, feed, node, index, false, capacities))),
    onward: larger(far.map((node) => flowToReturn(circuit, feed, node, index, capacities))),
  };
}

function flowToReturn(
  circuit: Circuit,
  { instance, conducts }: Feed,
  start: number,
  skip: number,
  capacities: Map<string, number>,
): Flow {
  return largestFlow(circuit, {
    start,
    end: instance.supply.ret,
    conducts,
    throughLoads: true,
    exceptElement: instance.supply.element,
    isHot: (node) => isReached(instance.hot, node),
    isReturn: (node) => isReached(instance.ret, node),
    skip,
    capacities,
  });
}

function returnLimits(circuit: Circuit, feed: Feed, index: number, capacities: Map<string, number>): Limits {
  const link = circuit.links[index];
  if (link === undefined) return { into: { amps: Infinity, devices: [] }, onward: null };
  const near = nearEnds(feed.instance.ret, index, link.a, link.b);
  const loadSide = near.length === 1 ? [near[0] === link.a ? link.b : link.a] : near;
  return {
    into: larger(loadSide.map((node) => flowFromHot(circuit, feed, node, index, true, capacities))),
    onward: larger(near.map((node) => flowToReturn(circuit, feed, node, index, capacities))),
  };
}

/** Longest unprotected lead from a battery's terminal to its fuse, m. From memory: a practice, about 180 mm. */
export const unprotectedLeadM = 0.18;
/** A supply cord of this area or more is accepted behind a socket breaker of this rating or less. From memory. */
const socketProtection = { mm2: 0.75, amps: 16 };

function judge(
  circuit: Circuit,
  feed: Feed,
  conductor: Conductor,
  side: Side,
  high: Limits,
  low: Limits,
): ConductorProtection {
  const { view } = circuit;
  const source = feed.instance.supply.element;
  const ampacity = ampacityOf(conductor);
  const into = withLimit(feed, high.into.amps);
  const limitedBy = into.bySupply.length > 0 ? into.bySupply : high.into.devices;
  const base = {
    conductor: conductor.id,
    source,
    limitAmps: into.amps !== null && Number.isFinite(into.amps) ? into.amps : null,
    limitedBy,
    ampacityAmps: ampacity?.amps ?? null,
  };
  const answer = (
    verdict: ConductorProtection["verdict"],
    text: string,
    rest: Partial<ConductorProtection> = {},
  ): ConductorProtection => ({
    ...base,
    ...rest,
    verdict: verdict !== "pass" && feed.doubtful ? "unknown" : verdict,
    text,
  });
  if (ampacity === null) {
    return answer(
      "unknown",
      `${conductor.id}: its cross-section is not known or outside the tables, so nothing can be said of its protection.`,
    );
  }
  const may = `${conductor.id} may carry ${figure(ampacity.amps)} A (${ampacity.basis})`;
  const supplied = view.name(source);
  const names =
    into.bySupply.length > 0
      ? `${supplied} itself can give ${figure(into.amps ?? 0)} A`
      : limitedBy.length === 0
        ? `nothing of it comes from ${supplied}`
        : `${limitedBy.map((id) => view.name(id)).join(" and ")} lets ${figure(into.amps ?? 0)} A from ${supplied} through`;
  if (into.amps !== null && into.amps <= ampacity.amps) {
    return answer("pass", `${may}; ${names}.`);
  }
  const onward = high.onward;
  if (onward !== null && onward.amps <= ampacity.amps) {
    return overloadOnly(circuit, feed, conductor, side, onward, may, answer);
  }
  const lowest = Math.min(withLimit(feed, low.into.amps).amps ?? 0, low.onward?.amps ?? Infinity);
  if (lowest <= ampacity.amps) {
    return answer("unknown", `${may}; what limits the current from ${supplied} is not known.`);
  }
  return into.amps === null || !Number.isFinite(into.amps)
    ? answer("fail", `No fuse or breaker limits what ${supplied} can drive through ${conductor.id}. ${may}.`)
    : answer("fail", `${may}, but ${names}.`);
}

/** A device further on keeps the load within bounds; a short before it must be cleared by something else. */
function overloadOnly(
  circuit: Circuit,
  feed: Feed,
  conductor: Conductor,
  side: Side,
  onward: Flow,
  may: string,
  answer: (
    verdict: ConductorProtection["verdict"],
    text: string,
    rest?: Partial<ConductorProtection>,
  ) => ConductorProtection,
): ConductorProtection {
  const { view } = circuit;
  const source = view.elements.get(feed.instance.supply.element);
  const names = onward.devices.map((id) => view.name(id)).join(" and ");
  const load =
    names === ""
      ? `${may}; nothing further on draws from it`
      : `${may}; ${names} further on keeps the load to ${figure(onward.amps)} A`;
  const limited = { limitAmps: Number.isFinite(onward.amps) ? onward.amps : null, limitedBy: onward.devices };
  if (side !== "hot") return answer("pass", `${load}.`, limited);
  if (source?.kind === "mains-inlet") {
    if (source.upstreamAmps === null) {
      return answer(
        "unknown",
        `${load}, but what clears a short circuit in it is not known: state the fuse in the plug or the breaker before the socket.`,
        limited,
      );
    }
    const mm2 = conductor.area === null ? 0 : "mm2" in conductor.area ? conductor.area.mm2 : 0;
    if (mm2 >= socketProtection.mm2 && source.upstreamAmps <= socketProtection.amps) {
      return answer(
        "pass",
        `${load}; a short circuit in it is cleared by the ${figure(source.upstreamAmps)} A device before the socket.`,
        limited,
      );
    }
    return answer(
      "unknown",
      `${load}, but whether the ${figure(source.upstreamAmps)} A device before the socket protects so thin a conductor in a short circuit is not shown.`,
      limited,
    );
  }
  if (source?.kind === "battery") {
    const length = leadLength(circuit, feed, conductor.id);
    if (length === null)
      return answer(
        "unknown",
        `${load}, but the length of the lead from ${view.name(source.id)} to there is not known.`,
        limited,
      );
    return length <= unprotectedLeadM + 1e-9
      ? answer(
          "pass",
          `${load}; a short before it is fed by ${view.name(source.id)} without limit, over ${figure(length * 1000)} mm of lead (practice: up to ${unprotectedLeadM * 1000} mm).`,
          limited,
        )
      : answer(
          "fail",
          `${view.name(source.id)} feeds ${figure(length * 1000)} mm of lead up to the end of ${conductor.id} through no fuse; the fuse belongs within about ${unprotectedLeadM * 1000} mm of the pole.`,
          limited,
        );
  }
  return answer("fail", `${load}, but nothing clears a short circuit in it.`, limited);
}

/** Length of lead from the supply's hot pole to the far end of a conductor, m; `null` when a length is not known. */
function leadLength(circuit: Circuit, { instance }: Feed, id: string): number | null {
  const index = circuit.links.findIndex((link) => link.conductor === id);
  const link = circuit.links[index];
  if (link === undefined) return null;
  let at = instance.hot[link.b] === index ? link.b : link.a;
  let sum = 0;
  for (let guard = 0; guard < circuit.view.nodeCount; guard++) {
    const step = instance.hot[at] ?? -1;
    const crossed = circuit.links[step];
    if (crossed === undefined) return sum;
    if (crossed.conductor !== null) {
      const length = circuit.view.conductors.get(crossed.conductor)?.lengthM ?? null;
      if (length === null) return null;
      sum += length;
    }
    at = crossed.a === at ? crossed.b : crossed.a;
  }
  return null;
}

const severity = { fail: 0, unknown: 1, pass: 2 } as const;

/** Of several answers for the same conductor and supply the worst. */
function worstOf(all: ConductorProtection[]): ConductorProtection[] {
  const worst = new Map<string, ConductorProtection>();
  for (const each of all) {
    const key = `${each.conductor} ${each.source}`;
    const known = worst.get(key);
    if (known === undefined || severity[each.verdict] < severity[known.verdict]) worst.set(key, each);
  }
  return [...worst.values()];
}
