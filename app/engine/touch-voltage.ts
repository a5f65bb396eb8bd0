import type { Certainty, PartFinding, Verdict3 } from "./analysis";
import type { Circuit } from "./circuit";
import { earthedNodes } from "./earth-net";
import { isReached, type Instance } from "./energise";
import type { Element, TriState } from "./energy-map";
import { energisedPairs, holdsNode } from "./fed-nodes";
import { figure } from "./figure";
import { stackOf } from "./series";
import type { UnitFacts } from "./unit-facts";
import { classOfVolts, touchableVolts } from "./voltage-class";

/**
 * Contacts and parts that can be touched, or may be, and carry more than may be touched. The voltage counts with everything
 * that lies in series; a joint or stage that is not sure leaves the answer open.
 */
export function touchFindings(circuit: Circuit, facts: UnitFacts): PartFinding[] {
  const sure = energisedPairs(circuit, "certain");
  const wide = energisedPairs(circuit, "possible");
  const earthed = earthedNodes(circuit);
  return [...circuit.view.elements.values()].flatMap((element) => {
    const contacts = contactsOf(circuit, element);
    if (contacts === null || contacts.touchable === "no") return [];
    const found = [
      ...judge(circuit, element, contacts, earthed, sure, "certain", facts),
      ...judge(circuit, element, contacts, earthed, wide, "possible", facts),
    ];
    const worst = found.find(({ verdict }) => verdict === "fail") ?? found[0];
    return worst === undefined ? [] : [worst];
  });
}

interface Contacts {
  touchable: TriState;
  nodes: number[];
}

function contactsOf({ view }: Circuit, element: Element): Contacts | null {
  const nodes = view
    .terminals(element.id)
    .filter(({ role }) => role !== "earth")
    .map(({ name }) => view.nodeOf(element.id, name));
  switch (element.kind) {
    case "outlet":
    case "dc-inlet":
      return { touchable: element.touchable, nodes };
    case "accessible-part":
      return { touchable: "yes", nodes };
    default:
      return null;
  }
}

function judge(
  circuit: Circuit,
  element: Element,
  { touchable, nodes }: Contacts,
  earthed: ReadonlySet<number>,
  pairs: Instance[],
  certainty: Certainty,
  facts: UnitFacts,
): PartFinding[] {
  const { view } = circuit;
  return pairs.flatMap((pair): PartFinding[] => {
    const { supply } = pair;
    // With nothing plugged in the inlet's own source is not there. Mains on a touched part is told with the joints.
    if (supply.element === element.id) return [];
    if (supply.domain === "mains" && element.kind === "accessible-part") return [];
    if (!nodes.some((node) => touches(earthed, pair, element, node))) return [];
    const volts = stackOf(circuit, supply, facts).volts;
    const kind = classOfVolts(supply.domain, volts);
    if (kind === "touchable") return [];
    const verdict: Verdict3 =
      kind === "unknown" || touchable === "unknown" || certainty === "possible" ? "unknown" : "fail";
    return [
      {
        kind: "touch",
        element: element.id,
        verdict,
        text: touchText(view.name(element.id), view.name(supply.element), supply.domain === "dc", volts, {
          touchable,
          certainty,
        }),
        elements: [element.id, supply.element],
        conductors: view.wired
          .filter(({ from, to }) => from.element === element.id || to.element === element.id)
          .map(({ id }) => id),
      },
    ];
  });
}

/** The return pole of direct voltage on earthed metal is at earth's potential; every other pole can be felt. */
function touches(earthed: ReadonlySet<number>, pair: Instance, element: Element, node: number): boolean {
  if (!holdsNode(pair, node)) return false;
  if (element.kind !== "accessible-part" || pair.supply.domain !== "dc" || isReached(pair.hot, node))
    return true;
  return !earthed.has(node);
}

function touchText(
  name: string,
  source: string,
  direct: boolean,
  volts: number | null,
  { touchable, certainty }: { touchable: TriState; certainty: Certainty },
): string {
  const kind = direct ? "direct" : "alternating";
  const limit = direct ? touchableVolts.direct : touchableVolts.alternating;
  const can =
    touchable === "unknown"
      ? `${name}: whether its contacts can be touched is not known, and it`
      : `${name} can be touched and`;
  const carries = certainty === "possible" ? "may carry" : "carries";
  const amount = volts === null ? `a ${kind} voltage that is not known` : `${figure(volts)} V ${kind}`;
  return `${can} ${carries} ${amount} from ${source}; ${limit} V ${kind} is the most that may be touched.`;
}
