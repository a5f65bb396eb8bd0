import type { BackwardPath, Certainty, FalseIndication, ReverseResult } from "./analysis";
import type { Circuit, Supply, Transfer } from "./circuit";
import {
  conduction,
  configurations,
  energise,
  isReached,
  passes,
  type Condition,
  type Instance,
  type Position,
} from "./energise";
import type { ElementOf } from "./energy-map";

/** At most so many ways are told for one pair of sources and one condition; more add nothing to the finding. */
const waysToTell = 8;

/**
 * Every way by which one source can drive energy into another or onto the pins of an inlet while that one is absent: in the
 * healthy unit and with each single blocking part failed short. And every lamp that would tell something untrue by it.
 */
export function analyseReverse(circuit: Circuit): ReverseResult {
  const blockingParts = blockingPartsOf(circuit);
  const paths: BackwardPath[] = [];
  const falseIndications: FalseIndication[] = [];
  for (const from of circuit.sources) {
    for (const to of circuit.sources) {
      if (from.element !== to.element) paths.push(...pathsBetween(circuit, from, to, blockingParts));
    }
    falseIndications.push(...falseLights(circuit, from, blockingParts));
  }
  return { paths, falseIndications, blockingParts };
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

function pathsBetween(circuit: Circuit, from: Supply, to: Supply, blockingParts: string[]): BackwardPath[] {
  // Charging a battery through its charger is what the charger is for; any other way into a battery is not.
  const idle =
    circuit.view.elements.get(to.element)?.kind === "battery" ? chargersOf(circuit) : new Set<string>();
  const settings = positionsWhile(circuit, from.element, to.element);
  const healthy = unique(
    settings.flatMap((positions) => waysUnder(circuit, from, to, { positions, idle, includePossible: true })),
  );
  const known = new Set(healthy.map(({ id }) => id));
  const failed = blockingParts.flatMap((part) => {
    const found = settings.flatMap((positions) =>
      waysUnder(circuit, from, to, {
        positions,
        idle: withoutMember(idle, part),
        includePossible: true,
        failedShort: part,
      }),
    );
    return unique(found).filter(
      (path) => path.via.includes(part) && !known.has(`${path.id.split("|")[0] ?? ""}|`),
    );
  });
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

/** Ways under one condition, when both poles of the other source are reached by the same energised pair. */
function waysUnder(circuit: Circuit, from: Supply, to: Supply, condition: Condition): BackwardPath[] {
  const { instances, conducts } = energise(circuit, from, condition);
  const reaching = instances.filter((instance) => holdsPair(instance, to));
  if (reaching.length === 0) return [];
  const sure = energise(circuit, from, { ...condition, includePossible: false }).instances.some((each) =>
    holdsPair(each, to),
  );
  return reaching.flatMap((instance) =>
    simpleWays(circuit, instance, to.hot, conducts).map((way): BackwardPath => {
      const failed = condition.failedShort ?? null;
      const via = way.elements;
      const unknownParts = via.filter((id) => isInDoubt(circuit, id) && id !== failed);
      return {
        id: `${from.element} ${to.element} ${via.join(">")}|${failed ?? ""}`,
        from: from.element,
        to: to.element,
        via,
        conductors: way.conductors,
        failed,
        certainty: sure && unknownParts.length === 0 ? "certain" : "possible",
        unknownParts,
      };
    }),
  );
}

function holdsPair({ supply, hot, ret }: Instance, { hot: plus, ret: minus }: Supply): boolean {
  return (
    (isReached(hot, plus) && isReached(ret, minus)) ||
    (supply.domain !== "dc" && isReached(hot, minus) && isReached(ret, plus))
  );
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

interface Steps {
  elements: string[];
  conductors: string[];
}

/** The stages before an instance, each by one way, and every way without repeats inside it. */
function simpleWays(circuit: Circuit, instance: Instance, target: number, conducts: Uint8Array): Steps[] {
  const before: Steps[] =
    instance.parent === null
      ? [{ elements: [], conductors: [] }]
      : throughTransfer(circuit, instance.parent.instance, instance.parent.transfer, conducts);
  const inside = waysInside(circuit, instance, target, conducts);
  return before
    .flatMap((first) =>
      inside.map((then) => ({
        elements: withoutRepeats([...first.elements, ...then.elements]),
        conductors: [...first.conductors, ...then.conductors],
      })),
    )
    .slice(0, waysToTell);
}

function throughTransfer(
  circuit: Circuit,
  parent: Instance,
  transfer: Transfer,
  conducts: Uint8Array,
): Steps[] {
  const node = isReached(parent.hot, transfer.from.hot) ? transfer.from.hot : transfer.from.ret;
  return simpleWays(circuit, parent, node, conducts).map((way) => ({
    ...way,
    elements: [...way.elements, transfer.element],
  }));
}

const withoutRepeats = (ids: string[]) => ids.filter((id, index) => id !== ids[index - 1]);

function waysInside(circuit: Circuit, instance: Instance, target: number, conducts: Uint8Array): Steps[] {
  const start = instance.supply.hot;
  // With alternating voltage either pole may be the one that meets the other source's.
  const begin = isReached(instance.hot, target) ? start : instance.supply.ret;
  const sense = instance.supply.domain === "dc" ? "with" : "either";
  const found: Steps[] = [];
  const seen = new Set([begin]);
  const elements: string[] = [];
  const conductors: string[] = [];
  let steps = 0;
  const go = (node: number) => {
    if (found.length >= waysToTell || steps++ > 20_000) return;
    if (node === target) {
      found.push({ elements: [...elements], conductors: [...conductors] });
      return;
    }
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || !passes(link, conducts[index] ?? 0, node, sense)) continue;
      const next = link.a === node ? link.b : link.a;
      if (seen.has(next)) continue;
      seen.add(next);
      if (link.element !== null) elements.push(link.element);
      if (link.conductor !== null) conductors.push(link.conductor);
      go(next);
      if (link.element !== null) elements.pop();
      if (link.conductor !== null) conductors.pop();
      seen.delete(next);
    }
  };
  go(begin);
  return found;
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
