import type { Circuit } from "./circuit";
import { circuitOf } from "./circuit";
import { earthedNodes, isNeutralEarthed } from "./earth-net";
import { isReached, type Instance } from "./energise";
import type { Conductor, EnergyMap } from "./energy-map";
import { energisedPairs, holdsNode } from "./fed-nodes";
import { figure } from "./figure";
import { viewOf } from "./map-view";
import type { Problem } from "./problem";
import { roleProblems } from "./role-mismatch";
import { stackOf } from "./series";
import type { UnitFacts } from "./unit-facts";
import { classOfSupply, extraLowVolts } from "./voltage-class";

/** What is said of a conductor or a consumer against what feeds it, with everything switched on. */
export function circuitContradictions(map: EnergyMap, facts: UnitFacts): Problem[] {
  const circuit = circuitOf(viewOf(map));
  const pairs = energisedPairs(circuit);
  return [
    ...circuit.view.wired.flatMap((conductor) => conductorProblem(circuit, pairs, conductor, facts)),
    ...roleProblems(circuit, pairs, facts),
  ];
}

function conductorProblem(
  circuit: Circuit,
  pairs: Instance[],
  { id, circuit: said, from }: Conductor,
  facts: UnitFacts,
): Problem[] {
  const { view } = circuit;
  const node = view.nodeOf(from.element, from.terminal);
  const feeding = pairs.filter((pair) => holdsNode(pair, node));
  const mains = feeding.find(({ supply }) => supply.domain === "mains");
  const classed = feeding.map((pair) => ({ pair, volts: classOfSupply(circuit, pair.supply, facts) }));
  const high = classed.find(({ volts }) => volts === "hazardous")?.pair;
  const problem = (text: string): Problem[] => [
    { subject: { kind: "conductor", id }, field: "circuit", text, blocking: true },
  ];
  switch (said) {
    case "elv":
      if (mains !== undefined)
        return problem(
          `${id} is said to be extra-low voltage, but mains from ${view.name(mains.supply.element)} reaches it.`,
        );
      return high === undefined
        ? []
        : problem(
            `${id} is said to be extra-low voltage, but ${view.name(high.supply.element)} puts ${voltsOf(circuit, high, facts)} on it: above ${extraLowVolts.alternating} V alternating or ${extraLowVolts.direct} V direct call it mains.`,
          );
    case "mains": {
      const low = classed[0]?.pair;
      return low === undefined || classed.some(({ volts }) => volts === "hazardous" || volts === "unknown")
        ? []
        : problem(`${id} is said to be mains, but only ${view.name(low.supply.element)} feeds it.`);
    }
    case "earth": {
      const earthed = earthedNodes(circuit);
      const live = feeding.find(
        (pair) =>
          pair.supply.domain === "mains" &&
          !(isNeutralEarthed(circuit, earthed, pair) && isReached(pair.ret, node)),
      );
      if (live !== undefined)
        return problem(
          `${id} is said to be protective earth, but a pole of ${view.name(live.supply.element)} reaches it.`,
        );
      const hot = feeding.find((pair) => isReached(pair.hot, node) && !isBonded(circuit, pair));
      return hot === undefined
        ? []
        : problem(
            `${id} is said to be protective earth, but ${view.name(hot.supply.element)} feeds it from its ${hot.supply.domain === "dc" ? "plus pole" : "first pole"}.`,
          );
    }
  }
}

/** A pole that is joined to earth on purpose: earth conductors then belong to it. */
const isBonded = ({ view }: Circuit, { hot }: Instance): boolean =>
  [...view.elements.keys()].some((id) =>
    view.terminals(id).some(({ name, role }) => role === "earth" && isReached(hot, view.nodeOf(id, name))),
  );

function voltsOf(circuit: Circuit, { supply }: Instance, facts: UnitFacts): string {
  const { volts } = stackOf(circuit, supply, facts);
  const kind = supply.domain === "dc" ? "direct" : "alternating";
  return volts === null ? `an unknown ${kind} voltage` : `${figure(volts)} V ${kind}`;
}
