import type { ConductorProtection, DeviceReport, Verdict3 } from "./analysis";
import { carries, loadThrough, type CarriedLoad } from "./carried-load";
import type { Circuit, Link } from "./circuit";
import { isReached } from "./energise";
import type { ElementOf } from "./energy-map";
import type { Feed } from "./feeds";
import { figure } from "./figure";
import {
  guaranteedBreaking,
  loadableShare,
  proposeRating,
  prospectiveCurrent,
  standardRatings,
} from "./fuse-data";
import { stackOf } from "./series";
import { shortCircuitAmps } from "./supply-data";
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
      if (feed.reversed) continue;
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
  const prospectiveAmps = faultAmps(circuit, feed, facts);
  const breakingAmps =
    device.kind === "fuse"
      ? (guaranteedBreaking(device, feed.instance.supply.domain === "dc")?.amps ?? null)
      : device.breakingAmps;
  if (device.kind === "fuse" && breakingAmps !== null && breakingAmps < (device.breakingAmps ?? 0))
    texts.push(
      `${name}: ${figure(device.breakingAmps ?? 0)} A is entered as its breaking capacity, but its type stands for ${figure(breakingAmps)} A, which counts.`,
    );
  const breakingVerdict = judgeBreaking(name, view.name(source), prospectiveAmps, breakingAmps, texts);
  const voltageVerdict = judgeVoltage(
    name,
    device,
    feed,
    stackOf(circuit, feed.instance.supply, facts).volts,
    texts,
  );
  const placementVerdict = judgePlacement(circuit, feed, device, link, texts);
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
    placementVerdict,
    texts,
  };
}

/** Largest current of a dead short across the supply or across the series that it is part of, A; `null`: not known. */
function faultAmps(circuit: Circuit, { instance, limitAmps }: Feed, facts: UnitFacts): number | null {
  const own = shortCircuitAmps(circuit.view, instance, limitAmps);
  const { volts, members } = stackOf(circuit, instance.supply, facts);
  if (members.length < 2) return own;
  const ohms = members.map((id) => {
    const element = circuit.view.elements.get(id);
    return element?.kind === "battery" && element.internalMilliohms !== null
      ? element.internalMilliohms / 1000
      : null;
  });
  const inSeries = prospectiveCurrent(volts, ...ohms);
  return own === null || inSeries === null ? null : Math.max(own, inSeries);
}

/** A device in the neutral opens and leaves everything behind it live: it cannot be the only one that guards an inlet. */
function judgePlacement(
  circuit: Circuit,
  { instance, conducts }: Feed,
  device: Device,
  link: Link,
  texts: string[],
): Verdict3 {
  const { view } = circuit;
  const inlet = view.elements.get(instance.supply.element);
  if (inlet?.kind !== "mains-inlet") return "pass";
  const onRet = isReached(instance.ret, link.a) && !isReached(instance.hot, link.a);
  if (!onRet) return "pass";
  const guarding = circuit.links.find(
    ({ kind, element, a, b }, index) =>
      kind === "protector" &&
      element !== null &&
      ["fuse", "breaker"].includes(view.elements.get(element)?.kind ?? "") &&
      (conducts[index] ?? 0) !== 0 &&
      isReached(instance.hot, a) &&
      isReached(instance.hot, b),
  );
  const name = view.name(device.id);
  if (guarding !== undefined) {
    if (guarding.element !== device.id)
      texts.push(`${name} sits in the neutral; ${view.name(guarding.element ?? "")} guards the line.`);
    return "pass";
  }
  if (inlet.polarised === "yes") {
    texts.push(
      `${name} sits in the neutral of ${view.name(inlet.id)}: when it opens, everything stays live.`,
    );
    return "fail";
  }
  texts.push(
    `${name} sits in the neutral of ${view.name(inlet.id)} as drawn; with the plug the other way round it is in the line. It guards against a short between the poles, not from the other pole to earth.`,
  );
  return inlet.polarised === "unknown" ? "unknown" : "pass";
}

function judgeLoad(
  name: string,
  rating: number | null,
  load: CarriedLoad,
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
