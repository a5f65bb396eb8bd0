import type { Join } from "./analysis";
import type { Circuit, Link } from "./circuit";
import { conduction, configurations, type Position } from "./energise";

/**
 * Protective devices and contacts past which a plain path leads, so that they open nothing: for a device also over a closed
 * contact, for a contact over conductors alone, since contacts side by side may be meant.
 */
export function findBridges(circuit: Circuit): Join[] {
  const found = new Map<string, Join>();
  const all = configurations(circuit, () => null);
  const anywhere = new Map<string, Position>(circuit.switches.map(({ id }) => [id, "any"]));
  circuit.links.forEach((link, index) => {
    if (link.kind !== "protector" && link.kind !== "contact") return;
    if (link.element === null || link.a === link.b) return;
    // Most are told from one look with every contact closed.
    if (wayPast(circuit, index, link, anywhere) === null) return;
    for (const positions of link.kind === "contact" ? all.slice(0, 1) : all) {
      const way = wayPast(circuit, index, link, positions);
      if (way === null) continue;
      const id = `bridged ${link.element}`;
      if (!found.has(id)) found.set(id, bridge(circuit, link.element, id, way));
      break;
    }
  });
  return [...found.values()];
}

function bridge({ view }: Circuit, element: string, id: string, way: Link[]): Join {
  const contacts = way.flatMap((each) =>
    each.kind === "contact" && each.element !== null ? [each.element] : [],
  );
  // Which lead of a protection board it opens is not on the map.
  const sure =
    view.elements.get(element)?.kind !== "bms" && way.every(({ certainty }) => certainty === "certain");
  return {
    id,
    kind: "bridged",
    source: element,
    other: element,
    through: way.flatMap((each) => (each.kind === "common" && each.element !== null ? [each.element] : [])),
    switchesOn: [...new Set(contacts)],
    conductors: way.flatMap(({ conductor }) => (conductor === null ? [] : [conductor])),
    certainty: sure ? "certain" : "possible",
  };
}

function wayPast(
  circuit: Circuit,
  skip: number,
  past: Link,
  positions: ReadonlyMap<string, Position>,
): Link[] | null {
  const conducts = conduction(circuit, { positions, includePossible: true });
  const came = new Map<number, Link | null>([[past.a, null]]);
  for (const node of came.keys()) {
    if (node === past.b) return traced(came, node);
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || index === skip || link.element === past.element) continue;
      const plain =
        link.kind === "wire" ||
        link.kind === "common" ||
        (past.kind === "protector" && link.kind === "contact" && conducts[index] !== 0);
      const next = link.a === node ? link.b : link.a;
      if (plain && !came.has(next)) came.set(next, link);
    }
  }
  return null;
}

function traced(came: ReadonlyMap<number, Link | null>, end: number): Link[] {
  const way: Link[] = [];
  let at = end;
  for (let link = came.get(at); link; link = came.get(at)) {
    way.unshift(link);
    at = link.a === at ? link.b : link.a;
  }
  return way;
}
