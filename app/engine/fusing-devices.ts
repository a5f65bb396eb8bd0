import type { ConductorProtection, ContactReport, DeviceReport, Verdict3 } from "./analysis";
import type { Circuit, Link } from "./circuit";
import { isReached, passes } from "./energise";
import type { Element, ElementOf } from "./energy-map";
import { figure } from "./figure";
import type { Feed } from "./feeds";
import { guaranteedBreaking, loadableShare, proposeRating, standardRatings } from "./fuse-data";
import { shortCircuitAmps, suppliedVolts } from "./supply-data";
import type { UnitFacts } from "./unit-facts";

type Device = ElementOf<"fuse"> | ElementOf<"breaker">;

/** For each fuse and breaker and each supply that it carries: load against rating, fault current against capacity, voltage. */
export function deviceReports(
  circuit: Circuit,
  feeds: Feed[],
  conductors: ConductorProtection[],
  facts: UnitFacts,
): DeviceReport[] {
  const reports = new Map<string, DeviceReport>();
  const devices: Device[] = [...circuit.view.ofKind("fuse"), ...circuit.view.ofKind("breaker")];
  for (const device of devices) {
    for (const feed of feeds) {
      const index = circuit.links.findIndex((link) => link.element === device.id && carries(feed, link));
      const link = circuit.links[index];
      if (link === undefined) continue;
      const report = reportOn(circuit, feed, device, index, link, conductors, facts);
      const key = `${device.id} ${report.source}`;
      const known = reports.get(key);
      if (known === undefined || (known.loadAmps ?? Infinity) < (report.loadAmps ?? Infinity))
        reports.set(key, report);
    }
  }
  return [...reports.values()];
}

const carries = ({ instance }: Feed, { a, b }: Link) =>
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

/** Current of everything that is fed through a link, A: what is known of it, and whether something is not known. */
function loadThrough(
  circuit: Circuit,
  feed: Feed,
  index: number,
  facts: UnitFacts,
): { amps: number; complete: boolean } {
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
    if (!fed || found === undefined) continue;
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

function reachWithout(
  circuit: Circuit,
  conducts: Uint8Array,
  start: number,
  skip: number,
  sense: "with" | "against" | "either",
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

function reportOn(
  circuit: Circuit,
  feed: Feed,
  device: Device,
  index: number,
  link: Link,
  conductors: ConductorProtection[],
  facts: UnitFacts,
): DeviceReport {
  const { view } = circuit;
  const source = feed.instance.supply.element;
  const name = view.name(device.id);
  const load = loadThrough(circuit, feed, index, facts);
  const ampacities = conductors
    .filter((each) => each.source === source && each.limitedBy.includes(device.id))
    .flatMap(({ ampacityAmps }) => (ampacityAmps === null ? [] : [ampacityAmps]));
  const smallest = ampacities.length === 0 ? null : Math.min(...ampacities);
  const share = device.kind === "fuse" ? loadableShare(device.standard).share : 1;
  const texts: string[] = [];
  const loadVerdict = judgeLoad(name, device.ratingAmps, load, share, texts);
  const proposedAmps =
    load.complete && load.amps > 0
      ? proposeRating(load.amps, smallest ?? Infinity, standardRatings(device), share)
      : null;
  const largestAmps =
    smallest === null
      ? null
      : (standardRatings(device)
          .filter((each) => each <= smallest)
          .at(-1) ?? null);
  const prospectiveAmps = shortCircuitAmps(view, feed.instance, feed.limitAmps);
  const breakingAmps =
    device.kind === "fuse" ? (guaranteedBreaking(device)?.amps ?? null) : device.breakingAmps;
  const breakingVerdict = judgeBreaking(name, view.name(source), prospectiveAmps, breakingAmps, texts);
  const voltageVerdict = judgeVoltage(
    name,
    device,
    feed,
    suppliedVolts(view, feed.instance.supply, facts),
    texts,
  );
  return {
    device: device.id,
    source,
    loadAmps: load.complete ? load.amps : null,
    ratingAmps: device.ratingAmps,
    smallestAmpacityAmps: smallest,
    proposedAmps,
    largestAmps,
    prospectiveAmps: prospectiveAmps !== null && Number.isFinite(prospectiveAmps) ? prospectiveAmps : null,
    breakingAmps,
    loadVerdict: feed.doubtful && loadVerdict === "fail" ? "unknown" : loadVerdict,
    breakingVerdict: feed.doubtful && breakingVerdict === "fail" ? "unknown" : breakingVerdict,
    voltageVerdict: feed.doubtful && voltageVerdict === "fail" ? "unknown" : voltageVerdict,
    texts,
  };
}

/** Direct voltage and current below which a switch without a rating for it is let pass. From memory. */
const harmlessDirect = { volts: 15, amps: 1 };

/** For each switch and each supply that a pole carries: voltage and load against its rating for that kind of current. */
export function contactReports(circuit: Circuit, feeds: Feed[], facts: UnitFacts): ContactReport[] {
  const reports = new Map<string, ContactReport>();
  for (const element of circuit.switches) {
    for (const feed of feeds) {
      circuit.links.forEach((link, index) => {
        if (link.element !== element.id || !carries(feed, link)) return;
        const load = loadThrough(circuit, feed, index, facts);
        const report = contactReport(circuit, feed, element, load, facts);
        const key = `${element.id} ${report.source}`;
        const known = reports.get(key);
        if (known === undefined || (known.loadAmps ?? Infinity) < (report.loadAmps ?? Infinity))
          reports.set(key, report);
      });
    }
  }
  return [...reports.values()];
}

function contactReport(
  circuit: Circuit,
  feed: Feed,
  element: ElementOf<"switch">,
  load: { amps: number; complete: boolean },
  facts: UnitFacts,
): ContactReport {
  const { view } = circuit;
  const source = feed.instance.supply.element;
  const direct = feed.instance.supply.domain === "dc";
  const volts = suppliedVolts(view, feed.instance.supply, facts);
  const rated = direct
    ? { volts: element.dcVolts, amps: element.dcAmps, kind: "direct" }
    : { volts: element.acVolts, amps: element.acAmps, kind: "alternating" };
  const name = view.name(element.id);
  const base = { switch: element.id, source, loadAmps: load.complete ? load.amps : null };
  const answer = (verdict: Verdict3, text: string): ContactReport => ({
    ...base,
    verdict: feed.doubtful && verdict === "fail" ? "unknown" : verdict,
    text,
  });
  const carried = `${load.complete ? "" : "at least "}${figure(load.amps)} A`;
  if (
    volts !== null &&
    direct &&
    load.complete &&
    volts <= harmlessDirect.volts &&
    load.amps <= harmlessDirect.amps
  ) {
    return answer(
      "pass",
      `${name} breaks ${figure(volts)} V direct and ${carried} from ${view.name(source)}, little enough for any switch.`,
    );
  }
  if (rated.volts === 0 || rated.amps === 0) {
    return answer(
      "fail",
      `${name} has no rating for ${rated.kind} current, and it breaks ${carried} from ${view.name(source)}.`,
    );
  }
  if (rated.volts !== null && volts !== null && rated.volts < volts) {
    return answer(
      "fail",
      `${name} is rated ${figure(rated.volts)} V ${rated.kind}, but ${view.name(source)} has ${figure(volts)} V.`,
    );
  }
  if (rated.amps !== null && rated.amps < load.amps) {
    return answer(
      "fail",
      `${name} is rated ${figure(rated.amps)} A ${rated.kind}, but it carries ${carried} from ${view.name(source)}.`,
    );
  }
  if (rated.volts === null || rated.amps === null || volts === null || !load.complete) {
    return answer(
      "unknown",
      `${name}: its rating or what it carries from ${view.name(source)} is not wholly known.`,
    );
  }
  return answer(
    "pass",
    `${name}, rated ${figure(rated.volts)} V and ${figure(rated.amps)} A ${rated.kind}, carries ${carried} from ${view.name(source)}.`,
  );
}

function judgeLoad(
  name: string,
  rating: number | null,
  load: { amps: number; complete: boolean },
  share: number,
  texts: string[],
): Verdict3 {
  if (rating === null) {
    texts.push(`${name}: its rating is not known.`);
    return "unknown";
  }
  const usable = rating * share;
  const cause = share < 1 ? ` (${share * 100} % of a UL rating of ${figure(rating)} A)` : "";
  if (load.amps > usable) {
    texts.push(
      `${name}: the load is ${load.complete ? "" : "at least "}${figure(load.amps)} A, more than ${figure(usable)} A${cause}.`,
    );
    return "fail";
  }
  if (!load.complete) {
    texts.push(`${name}: not every load behind it is known.`);
    return "unknown";
  }
  texts.push(`${name}: the load of ${figure(load.amps)} A is within ${figure(usable)} A${cause}.`);
  return "pass";
}

function judgeBreaking(
  name: string,
  source: string,
  prospective: number | null,
  breaking: number | null,
  texts: string[],
): Verdict3 {
  if (prospective === null || !Number.isFinite(prospective)) {
    texts.push(`${name}: the short-circuit current from ${source} is not known.`);
    return "unknown";
  }
  if (breaking === null) {
    texts.push(
      `${name}: its breaking capacity is not known; ${source} can drive ${figure(prospective)} A into a short circuit.`,
    );
    return "unknown";
  }
  const passesIt = breaking >= prospective;
  texts.push(
    passesIt
      ? `${name}: breaks ${figure(breaking)} A, and ${source} can drive ${figure(prospective)} A into a short circuit.`
      : `${name}: breaks only ${figure(breaking)} A, but ${source} can drive ${figure(prospective)} A into a short circuit.`,
  );
  return passesIt ? "pass" : "fail";
}

function judgeVoltage(
  name: string,
  device: Device,
  { instance }: Feed,
  volts: number | null,
  texts: string[],
): Verdict3 {
  const direct = instance.supply.domain === "dc";
  const rated = direct ? device.dcVolts : device.acVolts;
  const kind = direct ? "direct" : "alternating";
  if (rated === null || volts === null) {
    texts.push(
      `${name}: ${rated === null ? `its rating for ${kind} voltage` : "the voltage across it when it opens"} is not known.`,
    );
    return "unknown";
  }
  if (rated === 0) {
    texts.push(
      `${name}: its maker states no rating for ${kind} voltage, and it has to break ${figure(volts)} V.`,
    );
    return "fail";
  }
  const enough = rated >= volts;
  texts.push(
    `${name}: rated ${figure(rated)} V ${kind}, ${enough ? "enough" : "too little"} for ${figure(volts)} V.`,
  );
  return enough ? "pass" : "fail";
}
