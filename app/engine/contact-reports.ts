import type { ContactReport, Verdict3 } from "./analysis";
import { carries, loadThrough, type CarriedLoad } from "./carried-load";
import type { Circuit } from "./circuit";
import type { ElementOf } from "./energy-map";
import type { Feed } from "./feeds";
import { figure } from "./figure";
import { stackOf } from "./series";
import type { UnitFacts } from "./unit-facts";

/** Direct voltage and current below which a switch without a rating for it is let pass. From memory. */
const harmlessDirect = { volts: 15, amps: 1 };

/** For each switch and each supply that a pole carries: voltage and load against its rating for that kind of current. */
export function contactReports(circuit: Circuit, feeds: Feed[], facts: UnitFacts): ContactReport[] {
  const reports = new Map<string, ContactReport>();
  for (const element of circuit.switches) {
    for (const feed of feeds) {
      if (feed.reversed) continue;
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
  load: CarriedLoad,
  facts: UnitFacts,
): ContactReport {
  const { view } = circuit;
  const source = feed.instance.supply.element;
  const direct = feed.instance.supply.domain === "dc";
  const volts = stackOf(circuit, feed.instance.supply, facts).volts;
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
