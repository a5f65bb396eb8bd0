import type { PartFinding, Verdict3 } from "./analysis";
import { carries, loadThrough, type CarriedLoad } from "./carried-load";
import type { Circuit } from "./circuit";
import { isReached } from "./energise";
import type { Element, ElementOf } from "./energy-map";
import { energisedPairs } from "./fed-nodes";
import { feedsOf, type Feed } from "./feeds";
import { figure } from "./figure";
import { judgeBoard, judgePack } from "./pack-ratings";
import { stackOf } from "./series";
import type { UnitFacts } from "./unit-facts";

/**
 * Parts whose ratings don't suit what they carry, or of which that is not known: diodes, thermal cut-outs, capacitors across
 * mains, lamps on mains, bare conductors, packs and their protection boards, earth fixings. What suits is left out.
 */
export function ratingFindings(circuit: Circuit, facts: UnitFacts): PartFinding[] {
  const feeds = feedsOf(circuit, facts).filter(({ reversed }) => !reversed);
  const found = [...circuit.view.elements.values()].flatMap((element) =>
    judgeElement(circuit, feeds, element, facts).map(({ verdict, text }): PartFinding => ({
      kind: "rating",
      element: element.id,
      verdict,
      text: `${circuit.view.name(element.id)} ${text}.`,
      elements: [element.id],
      conductors: [],
    })),
  );
  return [...found.filter(({ verdict }) => verdict !== "pass"), ...bareConductors(circuit)];
}

export interface Rated {
  verdict: Verdict3;
  /** Said after the part's name. */
  text: string;
}

function judgeElement(circuit: Circuit, feeds: Feed[], element: Element, facts: UnitFacts): Rated[] {
  switch (element.kind) {
    case "diode": {
      const volts = mostVolts(circuit, element.id, facts);
      return [
        judgeCurrent(circuit, feeds, element.id, element.ratedAmps, facts),
        // Behind a diode a capacitor holds the peak while the other half-wave comes: twice the peak.
        judgeVolts(element.reverseVolts, volts.direct, volts.alternating * 2 * Math.SQRT2, "blocks"),
      ];
    }
    case "ideal-diode": {
      const volts = mostVolts(circuit, element.id, facts);
      return [
        judgeCurrent(circuit, feeds, element.id, element.ratedAmps, facts),
        judgeVolts(element.maxVolts, volts.direct, volts.alternating * Math.SQRT2, "stands"),
      ];
    }
    case "thermal-cutout": {
      const volts = mostVolts(circuit, element.id, facts);
      return [
        judgeCurrent(circuit, feeds, element.id, element.ratingAmps, facts),
        ...(volts.alternating > 0 ? [judgeVolts(element.acVolts, 0, volts.alternating, "opens AC")] : []),
        ...(volts.direct !== 0 ? [judgeVolts(element.dcVolts, volts.direct, 0, "opens DC")] : []),
      ];
    }
    case "x-capacitor":
    case "y-capacitor":
      return onMains(circuit, element.id) ? [judgeCapacitor(element)] : [];
    case "indicator":
      return (element.lamp === "led" || element.lamp === "unknown") && onMains(circuit, element.id)
        ? [
            {
              verdict: "unknown",
              text: "is a lamp across mains: a bare LED does not stand it, and the map does not tell what limits its current",
            },
          ]
        : [];
    case "battery":
      return judgePack(circuit, feeds, element, facts);
    case "bms":
      return judgeBoard(circuit, element);
    case "earth-terminal":
      return element.lockedFixing === "no"
        ? [{ verdict: "fail", text: "has no locked fixing of its own: it can come loose, and earth with it" }]
        : element.lockedFixing === "unknown"
          ? [{ verdict: "unknown", text: "may have no locked fixing of its own" }]
          : [];
    default:
      return [];
  }
}

/** Largest load of any feed through an element against its rated current. */
function judgeCurrent(
  circuit: Circuit,
  feeds: Feed[],
  id: string,
  rated: number | null,
  facts: UnitFacts,
): Rated {
  let most: CarriedLoad = { amps: 0, complete: true };
  for (const feed of feeds) {
    circuit.links.forEach((link, index) => {
      if (link.element !== id || !carries(feed, link)) return;
      const { amps, complete } = loadThrough(circuit, feed, index, facts);
      most = { amps: Math.max(most.amps, amps), complete: most.complete && complete };
    });
  }
  const load = `${most.complete ? "" : "at least "}${figure(most.amps)} A`;
  if (rated === null)
    return { verdict: "unknown", text: `carries ${load}, and its rated current is not known` };
  if (most.amps > rated) return { verdict: "fail", text: `is rated ${figure(rated)} A, but carries ${load}` };
  return most.complete
    ? { verdict: "pass", text: `is rated ${figure(rated)} A and carries ${load}` }
    : {
        verdict: "unknown",
        text: `is rated ${figure(rated)} A, and not everything that it carries is known`,
      };
}

interface MostVolts {
  /** `null`: not known; 0: none. */
  direct: number | null;
  alternating: number;
}

/** Highest direct and alternating voltage of whatever reaches a terminal of an element. */
function mostVolts(circuit: Circuit, id: string, facts: UnitFacts): MostVolts {
  const nodes = circuit.view.terminals(id).map(({ name }) => circuit.view.nodeOf(id, name));
  let direct: number | null = 0;
  let alternating: number | null = 0;
  for (const { supply, hot, ret } of energisedPairs(circuit, "possible")) {
    const isThere = nodes.some(
      (node) => isReached(hot, node) || (supply.domain !== "dc" && isReached(ret, node)),
    );
    if (!isThere) continue;
    const volts = stackOf(circuit, supply, facts).volts;
    if (supply.domain === "dc") direct = direct === null || volts === null ? null : Math.max(direct, volts);
    else alternating = alternating === null || volts === null ? null : Math.max(alternating, volts);
  }
  return { direct: alternating === null ? null : direct, alternating: alternating ?? 0 };
}

function judgeVolts(rated: number | null, direct: number | null, alternating: number, does: string): Rated {
  if (rated === null || direct === null)
    return {
      verdict: "unknown",
      text:
        rated === null
          ? `${does} a voltage that is not known`
          : `${does} ${figure(rated)} V, and the voltage on it is not known`,
    };
  const volts = Math.max(direct, alternating);
  return volts > rated
    ? { verdict: "fail", text: `${does} ${figure(rated)} V only, and ${figure(volts)} V can stand across it` }
    : { verdict: "pass", text: `${does} ${figure(rated)} V, and at most ${figure(volts)} V stand across it` };
}

function judgeCapacitor({ safetyClass, kind }: ElementOf<"x-capacitor"> | ElementOf<"y-capacitor">): Rated {
  const wanted = kind === "x-capacitor" ? "X1 or X2" : "Y1 or Y2";
  switch (safetyClass) {
    case "unknown":
      return { verdict: "unknown", text: `is on mains, and whether it is of class ${wanted} is not known` };
    case "none":
      return { verdict: "fail", text: `is on mains and not of class ${wanted}` };
    default:
      return { verdict: "pass", text: `is of class ${safetyClass}` };
  }
}

/** A pole at mains voltage reaches a terminal of the element. */
function onMains(circuit: Circuit, id: string): boolean {
  const nodes = circuit.view.terminals(id).map(({ name }) => circuit.view.nodeOf(id, name));
  return energisedPairs(circuit, "possible").some(
    ({ supply, hot, ret }) =>
      supply.domain === "mains" && nodes.some((node) => isReached(hot, node) || isReached(ret, node)),
  );
}

/** Bare conductors at mains voltage: whether they can be touched or come near anything is not on the map. */
function bareConductors({ view }: Circuit): PartFinding[] {
  return view.wired
    .filter(({ insulation, circuit }) => insulation === "none" && circuit === "mains")
    .map(({ id, from, to }) => ({
      kind: "rating",
      element: from.element,
      verdict: "unknown",
      text: `${id} is a bare conductor at mains voltage from ${view.name(from.element)} to ${view.name(to.element)}: its distances to other parts are not on the map.`,
      elements: [from.element, to.element],
      conductors: [id],
    }));
}
