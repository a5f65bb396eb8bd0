import type { Certainty } from "./analysis";
import type { Circuit } from "./circuit";
import { configurations, energise, isReached, type Instance } from "./energise";
import type { ElementKind, ElementOf } from "./energy-map";
import { batteryFullVolts } from "./supply-data";

/** Something whose energy reaches both poles of a battery. */
export interface Feeder {
  element: string;
  kind: ElementKind;
  alternating: boolean;
  /** Highest voltage that it can put there, V; `null`: not known. */
  volts: number | null;
  /** Largest current that it gives, A; `null`: not known. */
  amps: number | null;
  certainty: Certainty;
}

/** Every charger, supply, inlet or other battery that feeds a battery, sure or not, in any setting with the rest switched on. */
export function feedersOf(circuit: Circuit, battery: ElementOf<"battery">): Feeder[] {
  const plus = circuit.view.nodeOf(battery.id, "+");
  const minus = circuit.view.nodeOf(battery.id, "-");
  const feeds = ({ supply, hot, ret }: Instance) =>
    supply.element !== battery.id &&
    ((isReached(hot, plus) && isReached(ret, minus)) ||
      (supply.domain !== "dc" && isReached(hot, minus) && isReached(ret, plus)));
  const found = new Map<string, Feeder>();
  for (const includePossible of [false, true]) {
    for (const instance of instancesOf(circuit, battery.id, includePossible)) {
      const { element } = instance.supply;
      if (!feeds(instance) || found.has(element)) continue;
      found.set(element, feederOf(circuit, instance, includePossible ? "possible" : "certain"));
    }
  }
  return [...found.values()];
}

const instancesOf = (circuit: Circuit, except: string, includePossible: boolean): Instance[] =>
  configurations(circuit, () => null).flatMap((positions) =>
    circuit.sources
      .filter(({ element }) => element !== except)
      .flatMap((source) => energise(circuit, source, { positions, includePossible }).instances),
  );

function feederOf({ view }: Circuit, { supply, parent }: Instance, certainty: Certainty): Feeder {
  const element = view.elements.get(supply.element);
  const base = {
    element: supply.element,
    kind: element?.kind ?? ("dc-inlet" as const),
    alternating: supply.domain !== "dc",
    certainty,
  };
  // What flows backwards out of an input is not limited by the figures for the output.
  if (parent?.transfer.mode === "backward") return { ...base, volts: null, amps: null };
  switch (element?.kind) {
    case "charger":
      return { ...base, volts: element.setPointVolts, amps: element.outputAmps };
    case "isolated-supply":
    case "converter":
      return { ...base, volts: element.outputVolts, amps: element.outputAmps };
    case "dc-inlet":
      return { ...base, volts: element.volts, amps: element.maxAmps };
    case "battery":
      return { ...base, volts: batteryFullVolts(element), amps: null };
    default:
      return { ...base, volts: null, amps: null };
  }
}

/**
 * What charges a battery only together with others in series: it reaches the plus of one and the minus of another, while
 * this battery's pole is joined to the opposite pole of a neighbour.
 */
export function stackFeeders(circuit: Circuit, battery: ElementOf<"battery">): string[] {
  const batteries = circuit.sources.filter(
    ({ element }) => circuit.view.elements.get(element)?.kind === "battery",
  );
  const members = new Set([battery.id]);
  const joined = (a: (typeof batteries)[number], b: (typeof batteries)[number]) =>
    configurations(circuit, () => null).some((positions) =>
      energise(circuit, a, { positions, includePossible: true }).instances.some(
        ({ supply, hot }) => supply.element === a.element && isReached(hot, b.ret),
      ),
    );
  for (let size = 0; size !== members.size;) {
    size = members.size;
    for (const a of batteries)
      for (const b of batteries)
        if (a !== b && members.has(a.element) !== members.has(b.element) && joined(a, b))
          [a, b].forEach(({ element }) => members.add(element));
  }
  if (members.size === 1) return [];
  const stack = batteries.filter(({ element }) => members.has(element));
  const found = circuit.sources
    .filter(({ element }) => !members.has(element))
    .flatMap((source) =>
      configurations(circuit, () => null).flatMap(
        (positions) => energise(circuit, source, { positions, includePossible: true }).instances,
      ),
    )
    .filter(
      ({ hot, ret }) =>
        stack.some((each) => isReached(hot, each.hot)) && stack.some((each) => isReached(ret, each.ret)),
    )
    .map(({ supply }) => supply.element);
  return [...new Set(found)].filter((id) => !members.has(id));
}
