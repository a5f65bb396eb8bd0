import type { ConductorProtection, DeviceReport, Verdict3 } from "./analysis";
import { carries, loadThrough, type CarriedLoad } from "./carried-load";
import type { Circuit, Link } from "./circuit";
import type { ElementOf } from "./energy-map";
import type { Feed } from "./feeds";
import { figure } from "./figure";
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
