import type { Verdict3 } from "./analysis";
import type { Reason } from "./bench-check";
import type { Circuit } from "./circuit";
import { configurations, energise, isReached } from "./energise";
import type { ElementOf } from "./energy-map";
import { figure } from "./figure";
import { worst } from "./mains-isolation";
import { batteryFullVolts, cellLimits } from "./supply-data";

export interface BatteryReport {
  battery: string;
  /** Chargers, supplies and inlets whose energy reaches its poles. */
  chargedBy: string[];
  fullVolts: number | null;
  emptyVolts: number | null;
  verdict: Verdict3;
  reasons: Reason[];
}

/** For each battery: charging voltage and current against its limits, protection, strings. */
export function analyseBatteries(circuit: Circuit): BatteryReport[] {
  return circuit.view.ofKind("battery").map((battery) => reportOn(circuit, battery));
}

function reportOn(circuit: Circuit, battery: ElementOf<"battery">): BatteryReport {
  const { view } = circuit;
  const name = view.name(battery.id);
  const reasons: Reason[] = [];
  const verdicts: Verdict3[] = [];
  const add = (verdict: Verdict3, text: string, elements: string[]) => {
    verdicts.push(verdict);
    reasons.push({ text, elements, conductors: [] });
  };
  const limits = battery.chemistry === "unknown" ? null : cellLimits[battery.chemistry];
  const fullVolts = batteryFullVolts(battery);
  const feeders = feedersOf(circuit, battery);
  const lithium = battery.chemistry === "lifepo4" || battery.chemistry === "li-ion";

  if (fullVolts === null) {
    add("unknown", `${name}: chemistry or number of cells is not known, and with it the charging limit.`, [
      battery.id,
    ]);
  }
  for (const feeder of feeders) {
    const element = view.elements.get(feeder);
    if (element?.kind === "charger") {
      judgeVoltage(name, view.name(feeder), element.setPointVolts, fullVolts, [battery.id, feeder], add);
      judgeCurrent(
        name,
        view.name(feeder),
        element.outputAmps,
        battery.maxChargeAmps,
        [battery.id, feeder],
        add,
      );
    }
  }
  if (lithium || battery.chemistry === "unknown") {
    const protection = protectionOf(circuit, battery);
    if (protection.length > 0) {
      add("pass", `${name} is joined to the rest through ${view.name(protection[0] ?? "")}.`, [
        battery.id,
        ...protection,
      ]);
    } else if (lithium)
      add("fail", `${name} is a lithium battery without a protection board on both poles.`, [battery.id]);
    else
      add(
        "unknown",
        `${name}: whether it needs a protection board depends on its chemistry, which is not known.`,
        [battery.id],
      );
  }
  if (battery.stringsInParallel !== null && battery.stringsInParallel > 1) {
    reasons.push({
      text: `${name} has ${battery.stringsInParallel} strings in parallel: a bad cell is fed by the other strings. Each needs its own current limit or matched cells that were joined at equal voltage.`,
      elements: [battery.id],
      conductors: [],
    });
  }
  if (verdicts.length === 0) add("pass", `${name}: nothing on the map charges it.`, [battery.id]);
  return {
    battery: battery.id,
    chargedBy: feeders,
    fullVolts,
    emptyVolts:
      limits === null || battery.cellsInSeries === null ? null : limits.empty * battery.cellsInSeries,
    verdict: worst(verdicts),
    reasons,
  };
}

type Add = (verdict: Verdict3, text: string, elements: string[]) => void;

function judgeVoltage(
  name: string,
  charger: string,
  setPoint: number | null,
  full: number | null,
  elements: string[],
  add: Add,
) {
  if (setPoint === null || full === null) {
    if (full !== null)
      add(
        "unknown",
        `The charging voltage of ${charger} is not known; ${name} allows ${figure(full)} V.`,
        elements,
      );
    return;
  }
  add(
    setPoint <= full + 1e-9 ? "pass" : "fail",
    `${charger} is set to ${figure(setPoint)} V and ${name} allows ${figure(full)} V, with no help from its protection board.`,
    elements,
  );
}

function judgeCurrent(
  name: string,
  charger: string,
  current: number | null,
  most: number | null,
  elements: string[],
  add: Add,
) {
  if (current === null || most === null) {
    add("unknown", `The charging current of ${charger} or what ${name} allows is not known.`, elements);
    return;
  }
  add(
    current <= most ? "pass" : "fail",
    `${charger} charges with up to ${figure(current)} A and ${name} allows ${figure(most)} A.`,
    elements,
  );
}

/** Ids of the supplies whose energy reaches both poles of a battery, with everything switched on. */
function feedersOf(circuit: Circuit, battery: ElementOf<"battery">): string[] {
  const plus = circuit.view.nodeOf(battery.id, "+");
  const minus = circuit.view.nodeOf(battery.id, "-");
  const found = configurations(circuit, () => null).flatMap((positions) =>
    circuit.sources
      .filter(({ element }) => element !== battery.id)
      .flatMap((source) => energise(circuit, source, { positions, includePossible: false }).instances)
      .filter(({ hot, ret }) => isReached(hot, plus) && isReached(ret, minus))
      .map(({ supply }) => supply.element),
  );
  return [...new Set(found)];
}

/** Protection boards that both poles of a battery lead to directly. */
function protectionOf({ view }: Circuit, battery: ElementOf<"battery">): string[] {
  const boards = (pole: string) =>
    view.wired.flatMap(({ from, to }) => {
      const other =
        from.element === battery.id && from.terminal === pole
          ? to
          : to.element === battery.id && to.terminal === pole
            ? from
            : null;
      return other !== null &&
        view.elements.get(other.element)?.kind === "bms" &&
        other.terminal.startsWith("B")
        ? [other.element]
        : [];
    });
  const plus = new Set(boards("+"));
  return boards("-").filter((id) => plus.has(id));
}
