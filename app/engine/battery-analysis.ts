import type { Verdict3 } from "./analysis";
import { feedersOf, stackFeeders, type Feeder } from "./battery-feeders";
import { protectionOf } from "./battery-protection";
import type { Reason } from "./bench-check";
import type { Circuit } from "./circuit";
import type { ElementOf } from "./energy-map";
import { figure } from "./figure";
import { worst } from "./isolation-parts";
import { batteryFullVolts, cellLimits } from "./supply-data";
import { list } from "./wording";

/** One finding about a battery with its own verdict, so that a sound one is not blamed for another's fault. */
export interface BatteryFinding extends Reason {
  /** `null`: something to look at, neither good nor bad by itself. */
  verdict: Verdict3 | null;
}

export interface BatteryReport {
  battery: string;
  /** Chargers, supplies and inlets whose energy reaches its poles, or may. */
  chargedBy: string[];
  fullVolts: number | null;
  emptyVolts: number | null;
  verdict: Verdict3;
  findings: BatteryFinding[];
}

type Add = (verdict: Verdict3 | null, text: string, elements: string[]) => void;

/** For each battery: charging voltage and current of all that feeds it against its limits, protection, strings. */
export function analyseBatteries(circuit: Circuit): BatteryReport[] {
  return circuit.view.ofKind("battery").map((battery) => reportOn(circuit, battery));
}

function reportOn(circuit: Circuit, battery: ElementOf<"battery">): BatteryReport {
  const { view } = circuit;
  const name = view.name(battery.id);
  const findings: BatteryFinding[] = [];
  const add: Add = (verdict, text, elements) => {
    findings.push({ verdict, text, elements: [battery.id, ...elements], conductors: [] });
  };
  const limits = battery.chemistry === "unknown" ? null : cellLimits[battery.chemistry];
  const fullVolts = batteryFullVolts(battery);
  const feeders = feedersOf(circuit, battery);
  if (fullVolts === null)
    add("unknown", `${name}: chemistry or number of cells is not known, and with it the charging limit.`, []);
  for (const feeder of feeders) {
    judgeVoltage(name, view.name(feeder.element), feeder, fullVolts, add);
    judgeCurrent(name, view.name(feeder.element), feeder, battery.maxChargeAmps, add);
  }
  judgeTogether(name, view.name, feeders, battery.maxChargeAmps, add);
  judgeProtection(circuit, battery, add);
  if (battery.stringsInParallel !== null && battery.stringsInParallel > 1) {
    add(
      null,
      `${name} has ${battery.stringsInParallel} strings in parallel: a bad cell is fed by the other strings. Each needs its own current limit or matched cells that were joined at equal voltage.`,
      [],
    );
  }
  if (feeders.length === 0) {
    const across = stackFeeders(circuit, battery);
    if (across.length > 0)
      add(
        "unknown",
        `${name} is charged in series with others by ${list(across.map((id) => view.name(id)))}: what each of them gets is not worked out.`,
        across,
      );
    else add("pass", `${name}: nothing on the map charges it.`, []);
  }
  return {
    battery: battery.id,
    chargedBy: feeders.map(({ element }) => element),
    fullVolts,
    emptyVolts:
      limits === null || battery.cellsInSeries === null ? null : limits.empty * battery.cellsInSeries,
    verdict: worst(findings.flatMap(({ verdict }) => (verdict === null ? [] : [verdict]))),
    findings,
  };
}

/** A fault that rests on something not known can't be excluded; it is not sure. */
const doubt = (verdict: Verdict3, { certainty }: Feeder): Verdict3 =>
  certainty === "possible" && verdict === "fail" ? "unknown" : verdict;

const reaching = ({ certainty }: Feeder) => (certainty === "possible" ? " may reach it and" : "");

function judgeVoltage(name: string, by: string, feeder: Feeder, full: number | null, add: Add) {
  if (full === null) return;
  if (feeder.alternating) {
    add(doubt("fail", feeder), `${by}${reaching(feeder)} puts alternating voltage on ${name}.`, [
      feeder.element,
    ]);
    return;
  }
  if (feeder.volts === null) {
    add("unknown", `The charging voltage of ${by} is not known; ${name} allows ${figure(full)} V.`, [
      feeder.element,
    ]);
    return;
  }
  const volts = `${figure(feeder.volts)} V`;
  add(
    doubt(feeder.volts <= full + 1e-9 ? "pass" : "fail", feeder),
    feeder.kind === "charger"
      ? `${by}${reaching(feeder)} is set to ${volts} and ${name} allows ${figure(full)} V, with no help from its protection board.`
      : `${by}, which is no charger,${reaching(feeder)} puts ${volts} straight on ${name}, which allows ${figure(full)} V.`,
    [feeder.element],
  );
}

function judgeCurrent(name: string, by: string, feeder: Feeder, most: number | null, add: Add) {
  if (feeder.kind === "battery") {
    add(
      "unknown",
      `${by} lies in parallel with ${name}: when they are not equally full, nothing on the map limits the current between them.`,
      [feeder.element],
    );
    return;
  }
  if (feeder.amps === null || most === null) {
    add("unknown", `The charging current of ${by} or what ${name} allows is not known.`, [feeder.element]);
    return;
  }
  add(
    doubt(feeder.amps <= most ? "pass" : "fail", feeder),
    `${by}${reaching(feeder)} charges with up to ${figure(feeder.amps)} A and ${name} allows ${figure(most)} A.`,
    [feeder.element],
  );
}

/** Several that each stay within the limit can be above it together. */
function judgeTogether(
  name: string,
  nameOf: (id: string) => string,
  feeders: Feeder[],
  most: number | null,
  add: Add,
) {
  const known = feeders.flatMap(({ amps }) => (amps === null ? [] : [amps]));
  if (known.length < 2 || most === null || known.some((each) => each > most)) return;
  const sum = known.reduce((total, each) => total + each, 0);
  const ids = feeders.map(({ element }) => element);
  if (sum > most)
    add(
      "unknown",
      `${list(ids.map(nameOf))} together charge with up to ${figure(sum)} A if they work at once, and ${name} allows ${figure(most)} A.`,
      ids,
    );
}

function judgeProtection(circuit: Circuit, battery: ElementOf<"battery">, add: Add) {
  const lithium = battery.chemistry === "lifepo4" || battery.chemistry === "li-ion";
  if (!lithium && battery.chemistry !== "unknown") return;
  const name = circuit.view.name(battery.id);
  const { boards, bypassing } = protectionOf(circuit, battery);
  if (boards.length === 0 && lithium)
    add("fail", `${name} is a lithium battery without a protection board on both poles.`, []);
  else if (boards.length === 0)
    add(
      "unknown",
      `${name}: whether it needs a protection board depends on its chemistry, which is not known.`,
      [],
    );
  else if (bypassing.length > 0)
    add(
      "fail",
      `${list(bypassing.map((id) => circuit.view.name(id)))} lies on the poles of ${name} before its protection board, which can't part it.`,
      bypassing,
    );
  else
    add(
      "pass",
      `${name} is joined to the rest through ${list(boards.map((id) => circuit.view.name(id)))}.`,
      boards,
    );
}
