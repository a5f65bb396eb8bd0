import type { ConductorProtection, FusingResult, Verdict3 } from "./analysis";
import { uncheckedText } from "./backfeed";
import type { Circuit } from "./circuit";
import { ampacityOf } from "./conductor-data";
import type { Conductor } from "./energy-map";
import {
  feedSettings,
  feedsOf,
  isExhausted,
  limitsOf,
  restart,
  sideOf,
  withLimit,
  type Feed,
  type Limits,
  type Side,
} from "./feeds";
import { figure } from "./figure";
import type { Flow } from "./flow";
import { contactReports } from "./contact-reports";
import { deviceReports } from "./fusing-devices";
import type { UnitFacts } from "./unit-facts";

/** For each conductor and supply what protects it, and for each device whether it suits load, fault current and voltage. */
export function analyseFusing(circuit: Circuit, facts: UnitFacts): FusingResult {
  const feeds = restart(feedsOf(circuit, facts));
  const indexOf = new Map(circuit.links.map(({ conductor }, index) => [conductor, index]));
  const conductors = worstOf(
    feeds.flatMap((feed) =>
      circuit.view.wired.flatMap((conductor) => {
        const found = protectionOf(circuit, feed, conductor, indexOf.get(conductor.id) ?? -1);
        return found === null ? [] : [found];
      }),
    ),
  );
  const unchecked = feedSettings(circuit).left;
  return openWhereUnchecked(circuit, {
    conductors,
    devices: deviceReports(circuit, feeds, conductors, facts),
    contacts: contactReports(circuit, feeds, facts),
    unchecked,
  });
}

/** What passes in the positions that were worked out is not known in the others. */
function openWhereUnchecked({ view }: Circuit, result: FusingResult): FusingResult {
  if (result.unchecked.length === 0) return result;
  const doubt = uncheckedText(view, result.unchecked);
  const open = (verdict: Verdict3): Verdict3 => (verdict === "pass" ? "unknown" : verdict);
  const tell = <Each extends { verdict: Verdict3; text: string }>(each: Each): Each =>
    each.verdict === "pass" ? { ...each, verdict: "unknown", text: `${each.text} ${doubt}` } : each;
  return {
    ...result,
    conductors: result.conductors.map(tell),
    contacts: result.contacts.map(tell),
    devices: result.devices.map((each) => ({
      ...each,
      loadVerdict: open(each.loadVerdict),
      texts: [...each.texts, doubt],
    })),
  };
}

function protectionOf(
  circuit: Circuit,
  feed: Feed,
  conductor: Conductor,
  index: number,
): ConductorProtection | null {
  const link = circuit.links[index];
  if (link === undefined) return null;
  const side = sideOf(feed, link.a);
  // Earth conductors carry nothing that feeds; one that a live pole does reach is judged like any other.
  if (side === null || (conductor.circuit === "earth" && side !== "hot")) return null;
  if (isExhausted(feed)) return notWorkedOut(feed, conductor);
  const high = limitsOf(circuit, feed, feed.high, index, side);
  const { low } = feed;
  const leastly = low === null ? () => high : () => limitsOf(circuit, feed, low, index, side);
  return judge(circuit, feed, conductor, side, high, leastly);
}

const notWorkedOut = (feed: Feed, { id }: Conductor): ConductorProtection => ({
  conductor: id,
  source: feed.instance.supply.element,
  limitAmps: null,
  limitedBy: [],
  ampacityAmps: null,
  verdict: "unknown",
  text: `${id}: the map is too meshed for its protection to be worked out wholly.`,
});

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
  leastly: () => Limits,
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
    text: feed.reversed && verdict !== "pass" ? `With the plug the other way round: ${text}` : text,
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
  const unknownLimit = () =>
    answer("unknown", `${may}; what limits the current from ${supplied} is not known.`);
  const low = leastly();
  // The least that it could be: a supply whose own limit is not known may give very little.
  const leastInto = feed.limitAmps === null ? 0 : (withLimit(feed, low.into.amps).amps ?? 0);
  const onward = high.onward();
  if (onward.amps <= ampacity.amps) {
    const found = overloadOnly(circuit, feed, conductor, side, onward, may, answer);
    return found.verdict === "fail" && leastInto <= ampacity.amps ? unknownLimit() : found;
  }
  const lowest = Math.min(leastInto, low.onward().amps);
  if (lowest <= ampacity.amps) return unknownLimit();
  if (ampacity.atLeast && (isBounded(into.amps) || isBounded(onward.amps))) {
    const short = isBounded(into.amps)
      ? null
      : overloadOnly(circuit, feed, conductor, side, onward, may, answer);
    return short?.verdict === "fail"
      ? short
      : answer(
          "unknown",
          `${conductor.id} is thicker than the table goes (${figure(ampacity.amps)} A at its end): whether it carries the ${figure(Math.min(into.amps ?? Infinity, onward.amps))} A that can flow in it is not known.`,
        );
  }
  return into.amps === null || !Number.isFinite(into.amps)
    ? answer("fail", `No fuse or breaker limits what ${supplied} can drive through ${conductor.id}. ${may}.`)
    : answer("fail", `${may}, but ${names}.`);
}

const isBounded = (amps: number | null): boolean => amps !== null && Number.isFinite(amps);

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
