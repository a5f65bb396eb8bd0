import type { Circuit } from "./circuit";
import { isReached, type Instance } from "./energise";
import type { MapView } from "./map-view";

export interface EarthTerminal {
  element: string;
  node: number;
}

/** Every terminal for the protective conductor, on whatever element it is. */
export function earthTerminals(view: MapView): EarthTerminal[] {
  return [...view.elements.keys()].flatMap((element) =>
    view
      .terminals(element)
      .filter(({ role }) => role === "earth")
      .map(({ name }) => ({ element, node: view.nodeOf(element, name) })),
  );
}

/**
 * Where earth begins: the pins of the mains inlets; in a unit without an inlet its own earth terminal, else the earth contacts
 * of its outlets.
 */
export function earthRoots(view: MapView): EarthTerminal[] {
  const all = earthTerminals(view);
  const of = (kind: string) => all.filter(({ element }) => view.elements.get(element)?.kind === kind);
  if (view.ofKind("mains-inlet").length > 0) return of("mains-inlet");
  const studs = of("earth-terminal");
  return studs.length > 0 ? studs : of("outlet");
}

/** Nodes joined with earth by conductors alone. */
export function earthedNodes(circuit: Circuit): ReadonlySet<number> {
  const earthed = new Set(earthRoots(circuit.view).map(({ node }) => node));
  for (const node of earthed) {
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link?.kind === "wire") earthed.add(link.a === node ? link.b : link.a);
    }
  }
  return earthed;
}

/** The name under which earth is told: the unit's earth terminal, else where earth begins. */
export function earthElement(circuit: Circuit, earthed: ReadonlySet<number>): string {
  const stud = circuit.view
    .ofKind("earth-terminal")
    .find(({ id }) => earthed.has(circuit.view.nodeOf(id, "PE")));
  return stud?.id ?? earthRoots(circuit.view)[0]?.element ?? "";
}

/** An inverter's own neutral is joined with earth, so that a residual-current device behind it can work. */
export function isNeutralEarthed(
  { view }: Circuit,
  earthed: ReadonlySet<number>,
  { supply, hot, ret }: Instance,
): boolean {
  if (view.elements.get(supply.element)?.kind !== "converter" || supply.domain !== "mains") return false;
  const earths = earthTerminals(view);
  return (
    earths.some(({ node }) => earthed.has(node) && isReached(ret, node)) &&
    !earths.some(({ node }) => isReached(hot, node))
  );
}

/** Inverters whose neutral is joined with earth by conductors alone. */
export function earthedNeutrals(circuit: Circuit): string[] {
  const earthed = earthedNodes(circuit);
  return circuit.view
    .ofKind("converter")
    .filter(({ id, output }) => output === "mains" && earthed.has(circuit.view.nodeOf(id, "N")))
    .map(({ id }) => id);
}
