import type { Circuit } from "./circuit";
import { conduction, isReached, uncheckedChangeovers, type Instance } from "./energise";
import type { Element } from "./energy-map";
import { energisedPairs, holdsNode } from "./fed-nodes";
import type { Problem } from "./problem";
import { leadsTo } from "./series-loads";
import type { UnitFacts } from "./unit-facts";
import { classOfSupply } from "./voltage-class";

/** The pair of terminals by which an element takes energy, and which kind of voltage it takes there. */
export interface Intake {
  takes: "mains" | "dc";
  hot: string;
  ret: string;
}

/** `null` for what takes no energy, or any kind. */
export function intakeOf(element: Element): Intake | null {
  const mains: Intake = { takes: "mains", hot: "L", ret: "N" };
  const direct = (hot: string, ret: string): Intake => ({ takes: "dc", hot, ret });
  switch (element.kind) {
    case "load":
    case "fan":
    case "outlet":
      return element.supply === "mains" ? mains : direct("+", "-");
    case "isolated-supply":
    case "transformer":
      return mains;
    case "charger":
      return element.supply === "mains" ? mains : direct("in+", "in-");
    case "converter":
      return direct("in+", "in-");
    case "battery":
    case "dc-inlet":
      return direct("+", "-");
    default:
      return null;
  }
}

/** Elements that are fed by the wrong kind of voltage, with the poles crossed, or by nothing. */
export function roleProblems(circuit: Circuit, pairs: Instance[], facts: UnitFacts): Problem[] {
  const wide = energisedPairs(circuit, "possible");
  return [...circuit.view.elements.values()].flatMap((element) => {
    const intake = intakeOf(element);
    if (intake === null) return [];
    const ends = {
      hot: circuit.view.nodeOf(element.id, intake.hot),
      ret: circuit.view.nodeOf(element.id, intake.ret),
    };
    const text =
      wrongKind(circuit, pairs, element, intake, ends, facts) ??
      crossed(circuit, pairs, element, intake, ends) ??
      unfed(circuit, wide, element, ends);
    return text === null
      ? []
      : [{ subject: { kind: "element" as const, id: element.id }, field: null, text, blocking: true }];
  });
}

interface Ends {
  hot: number;
  ret: number;
}

function wrongKind(
  circuit: Circuit,
  pairs: Instance[],
  element: Element,
  { takes }: Intake,
  { hot, ret }: Ends,
  facts: UnitFacts,
): string | null {
  const { view } = circuit;
  const reaching = pairs.filter((pair) => holdsNode(pair, hot) || holdsNode(pair, ret));
  if (takes === "dc") {
    const alternating = reaching.find(
      ({ supply }) =>
        supply.domain === "mains" ||
        // A rectifier is a converter that alternating voltage feeds.
        (supply.domain === "ac" &&
          element.kind !== "converter" &&
          classOfSupply(circuit, supply, facts) === "hazardous"),
    );
    return alternating === undefined
      ? null
      : `${view.name(element.id)} takes direct voltage, but ${view.name(alternating.supply.element)} puts ${alternating.supply.domain === "mains" ? "mains" : "a hazardous alternating voltage"} on it.`;
  }
  const between = pairs.filter((pair) => isBetween(pair, hot, ret));
  const direct = between.find(({ supply }) => supply.domain === "dc");
  return direct === undefined || between.some(({ supply }) => supply.domain !== "dc")
    ? null
    : `${view.name(element.id)} takes alternating voltage, but only direct voltage from ${view.name(direct.supply.element)} is put on it.`;
}

/** Either way round. */
const isBetween = (pair: Instance, a: number, b: number): boolean =>
  (isReached(pair.hot, a) && isReached(pair.ret, b)) || (isReached(pair.hot, b) && isReached(pair.ret, a));

function crossed(
  { view }: Circuit,
  pairs: Instance[],
  element: Element,
  { takes }: Intake,
  { hot, ret }: Ends,
): string | null {
  if (takes !== "dc" || element.kind === "battery" || element.kind === "dc-inlet") return null;
  const fed = pairs
    .filter(({ supply }) => supply.domain === "dc")
    .filter((pair) => isBetween(pair, hot, ret));
  const wrong = fed.find((pair) => isReached(pair.hot, ret) && isReached(pair.ret, hot));
  return wrong === undefined || fed.some((pair) => isReached(pair.hot, hot))
    ? null
    : `${view.name(element.id)} is connected to ${view.name(wrong.supply.element)} with plus and minus crossed.`;
}

/** Wired at both ends, and yet no current can come in at one and go out at the other, through other loads neither. */
function unfed(circuit: Circuit, pairs: Instance[], element: Element, { hot, ret }: Ends): string | null {
  const { view } = circuit;
  if (element.kind === "battery" || element.kind === "dc-inlet" || circuit.sources.length === 0) return null;
  if (uncheckedChangeovers(circuit).length > 0) return null;
  const wired = (node: number) => (circuit.linksAt[node] ?? []).some((index) => isWire(circuit, index));
  if (!wired(hot) || !wired(ret)) return null;
  if (pairs.some((pair) => isBetween(pair, hot, ret))) return null;
  const conducts = conduction(circuit, {
    positions: new Map(circuit.switches.map(({ id }) => [id, "any"])),
    includePossible: true,
  });
  const isPole = (node: number) => pairs.some((pair) => holdsNode(pair, node));
  return [hot, ret].every((end) => leadsTo(circuit, conducts, end, element.id, isPole))
    ? null
    : `${view.name(element.id)} is wired, but no source on the map feeds it.`;
}

const isWire = ({ links }: Circuit, index: number) => links[index]?.kind === "wire";
