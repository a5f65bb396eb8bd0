import type { BackwardPath, Certainty, FalseIndication, ReverseResult } from "./analysis";
import type { Circuit, Supply } from "./circuit";
import {
  conduction,
  configurations,
  energise,
  isReached,
  uncheckedChangeovers,
  type Condition,
  type Instance,
  type Position,
} from "./energise";
import type { ElementOf } from "./energy-map";
import { simpleWays, stepsInAll, type Budget } from "./reverse-ways";

/**
 * Every way by which one source can drive energy into another or onto the pins of an inlet while that one is absent: in the
 * healthy unit and with each single blocking part failed short. And every lamp that would tell something untrue by it.
 */
export function analyseReverse(circuit: Circuit): ReverseResult {
  const blockingParts = blockingPartsOf(circuit);
  const paths: BackwardPath[] = [];
  const falseIndications: FalseIndication[] = [];
  const budget: Budget = { steps: stepsInAll };
  for (const from of circuit.sources) {
    for (const to of circuit.sources) {
      if (from.element !== to.element) paths.push(...pathsBetween(circuit, from, to, blockingParts, budget));
    }
    falseIndications.push(...falseLights(circuit, from, blockingParts));
  }
  return { paths, falseIndications, blockingParts, unchecked: uncheckedChangeovers(circuit) };
}

/** Parts whose failing short can open a way: diodes, coil-driven contacts, and converters that are no barrier by insulation. */
function blockingPartsOf({ view }: Circuit): string[] {
  return [...view.elements.values()].flatMap((element) => {
    switch (element.kind) {
      case "diode":
      case "ideal-diode":
        return [element.id];
      case "switch":
        return element.actuator === "hand" ? [] : [element.id];
      case "converter":
      case "charger":
        return element.insulation === "none" || element.insulation === "unknown" ? [element.id] : [];
      default:
        return [];
    }
  });
}

/** Positions to be looked at while one source is present and another absent. Coils fed by the absent one have dropped out. */
function positionsWhile(circuit: Circuit, present: string, absent: string | null): Map<string, Position>[] {
  const relays = new Map(
    circuit.switches.filter(({ actuator }) => actuator !== "hand").map((each) => [each.id, each]),
  );
  return configurations(circuit, (id) => {
    const coil = relays.get(id)?.coilFedBy ?? null;
    if (coil === null) return null;
    if (coil === absent) return "off";
    if (coil === present) return "on";
    return absent === null && isSource(circuit, coil) ? "off" : null;
  });
}

const isSource = ({ sources }: Circuit, id: string) => sources.some(({ element }) => element === id);

function pathsBetween(
  circuit: Circuit,
  from: Supply,
  to: Supply,
  blockingParts: string[],
  budget: Budget,
): BackwardPath[] {
  // Charging a battery through its charger is what the charger is for; any other way into a battery is not.
  const idle =
    circuit.view.elements.get(to.element)?.kind === "battery" ? chargersOf(circuit) : new Set<string>();
  const settings = positionsWhile(circuit, from.element, to.element);
  const under = (condition: Omit<Condition, "positions">) =>
    unique(
      settings.flatMap((positions) => waysUnder(circuit, from, to, { ...condition, positions }, budget)),
    );
  const healthy = under({ idle, includePossible: true });
  // Where the healthy unit does it already, no part need fail for it.
  if (healthy.some(({ certainty, poles }) => certainty === "certain" && poles !== "neutral")) return healthy;
  const known = new Set(healthy.map(({ id }) => id));
  const failed = blockingParts.flatMap((part) =>
    under({ idle: withoutMember(idle, part), includePossible: true, failedShort: part }).filter(
      (path) => path.via.includes(part) && !known.has(`${path.id.split("|")[0] ?? ""}|`),
    ),
  );
  return [...healthy, ...failed];
}

function chargersOf({ view }: Circuit): Set<string> {
  return new Set(view.ofKind("charger").map(({ id }) => id));
}

function withoutMember(all: ReadonlySet<string>, member: string): ReadonlySet<string> {
  return new Set([...all].filter((each) => each !== member));
}

function unique(paths: BackwardPath[]): BackwardPath[] {
  const best = new Map<string, BackwardPath>();
  for (const path of paths) {
    const known = best.get(path.id);
    if (known === undefined || (known.certainty === "possible" && path.certainty === "certain"))
      best.set(path.id, path);
  }
  return [...best.values()];
}

/**
 * Ways under one condition, when both poles of the other source are reached by the same energised pair. The pins of a mains
 * plug must be parted from every pole, so there one pole of something at mains voltage is enough.
 */
function waysUnder(
  circuit: Circuit,
  from: Supply,
  to: Supply,
  condition: Condition,
  budget: Budget,
): BackwardPath[] {
  const { instances, conducts } = energise(circuit, from, condition);
  const reaching = instances.flatMap((instance) => {
    const poles = polesHeld(instance, to);
    return poles === null ? [] : [{ instance, poles }];
  });
  if (reaching.length === 0) return [];
  const certain = energise(circuit, from, { ...condition, includePossible: false }).instances.map((each) =>
    polesHeld(each, to),
  );
  return reaching.flatMap(({ instance, poles }) => {
    const { target, pole } = meetingPoint(instance, to);
    const sure = certain.some((each) => each === "both" || each === poles);
    return simpleWays(circuit, instance, target, pole, conducts, budget).map((way): BackwardPath => {
      const failed = condition.failedShort ?? null;
      const via = way.elements;
      const unknownParts = via.filter((id) => isInDoubt(circuit, id) && id !== failed);
      return {
        id: `${from.element} ${to.element} ${poles === "both" ? "" : `${poles} `}${via.join(">")}|${failed ?? ""}`,
        from: from.element,
        to: to.element,
        via,
        conductors: way.conductors,
        failed,
        certainty: sure && unknownParts.length === 0 ? "certain" : "possible",
        poles,
        unknownParts,
      };
    });
  });
}

function polesHeld({ supply, hot, ret }: Instance, to: Supply): BackwardPath["poles"] | null {
  const onPins = (reach: Instance["hot"]) => isReached(reach, to.hot) || isReached(reach, to.ret);
  const both =
    (isReached(hot, to.hot) && isReached(ret, to.ret)) ||
    (supply.domain !== "dc" && isReached(hot, to.ret) && isReached(ret, to.hot));
  if (both) return "both";
  if (to.domain !== "mains" || supply.domain !== "mains") return null;
  return onPins(hot) ? "live" : onPins(ret) ? "neutral" : null;
}

/** The pole of the other source that a pair meets, and with which of its own. */
function meetingPoint({ hot, ret }: Instance, to: Supply): { target: number; pole: "hot" | "ret" } {
  if (isReached(hot, to.hot)) return { target: to.hot, pole: "hot" };
  if (isReached(hot, to.ret) && !isReached(ret, to.hot)) return { target: to.ret, pole: "hot" };
  return { target: isReached(ret, to.hot) ? to.hot : to.ret, pole: "ret" };
}

/** Whether the way through an element rests on something that is not known of it. */
function isInDoubt({ view }: Circuit, id: string): boolean {
  const element = view.elements.get(id);
  switch (element?.kind) {
    case "converter":
    case "charger":
    case "isolated-supply":
      return element.conductsBackwards === "unknown";
    case "ideal-diode":
      return element.blocksReverse === "unknown";
    case "switch":
      return element.actuator !== "hand" && element.coilFedBy === null;
    default:
      return false;
  }
}

const truthfulSources: Partial<Record<ElementOf<"indicator">["meaning"], string[]>> = {
  "mains-present": ["mains-inlet"],
  "dc-input-present": ["dc-inlet"],
  "battery-connected": ["battery"],
  charging: ["mains-inlet", "dc-inlet"],
};

/** Lamps that a source lights by itself although what they tell of is absent. */
function falseLights(circuit: Circuit, source: Supply, blockingParts: string[]): FalseIndication[] {
  const kind = circuit.view.elements.get(source.element)?.kind ?? "";
  const settings = positionsWhile(circuit, source.element, null);
  return circuit.view.ofKind("indicator").flatMap((indicator): FalseIndication[] => {
    const truthful = truthfulSources[indicator.meaning];
    if (truthful === undefined || truthful.includes(kind)) return [];
    const lit = (failedShort: string | null): Certainty | null => {
      const by = (includePossible: boolean) =>
        settings.some((positions) =>
          isLit(circuit, indicator, source, { positions, includePossible, failedShort }),
        );
      return by(false) ? "certain" : by(true) ? "possible" : null;
    };
    const make = (failed: string | null, certainty: Certainty): FalseIndication => ({
      indicator: indicator.id,
      meaning: indicator.meaning,
      litBy: source.element,
      failed,
      certainty,
    });
    const healthy = lit(null);
    if (healthy !== null) return [make(null, healthy)];
    return blockingParts.flatMap((part) => {
      const certainty = lit(part);
      return certainty === null ? [] : [make(part, certainty)];
    });
  });
}

function isLit(
  circuit: Circuit,
  indicator: ElementOf<"indicator">,
  source: Supply,
  condition: Condition,
): boolean {
  const first = circuit.view.nodeOf(indicator.id, "1");
  const second = circuit.view.nodeOf(indicator.id, "2");
  return energise(circuit, source, condition, conduction(circuit, condition)).instances.some(
    ({ supply, hot, ret }) =>
      (isReached(hot, first) && isReached(ret, second)) ||
      ((indicator.lamp !== "led" || supply.domain !== "dc") &&
        isReached(hot, second) &&
        isReached(ret, first)),
  );
}
