import { terminalsOf, type Terminal } from "./elements";
import type { Conductor, Element, ElementKind, ElementOf, EnergyMap, TerminalReference } from "./energy-map";

/** A map with its look-ups made once: elements and conductors by id, and a node for each terminal. */
export interface MapView {
  map: EnergyMap;
  elements: ReadonlyMap<string, Element>;
  conductors: ReadonlyMap<string, Conductor>;
  /** Node of a terminal; -1 if there is no such terminal. */
  nodeOf(element: string, terminal: string): number;
  nodeCount: number;
  /** Conductors whose ends both exist. */
  wired: Conductor[];
  terminals(element: string): Terminal[];
  ofKind<Kind extends ElementKind>(kind: Kind): ElementOf<Kind>[];
  /** "F1 (mains fuse)": the id with its label, for sentences. */
  name(id: string): string;
}

const keyOf = ({ element, terminal }: TerminalReference) => `${element}\u0000${terminal}`;

/** Builds the view. Never throws: of elements with the same id the first counts, and a conductor to nowhere is left out. */
export function viewOf(map: EnergyMap): MapView {
  const elements = new Map<string, Element>();
  for (const element of map.elements) if (!elements.has(element.id)) elements.set(element.id, element);
  const conductors = new Map<string, Conductor>();
  for (const conductor of map.conductors)
    if (!conductors.has(conductor.id)) conductors.set(conductor.id, conductor);

  const terminalsById = new Map<string, Terminal[]>();
  const nets = new Map<string, number>();
  for (const element of elements.values()) {
    const terminals = terminalsOf(element);
    terminalsById.set(element.id, terminals);
    for (const { name } of terminals) nets.set(keyOf({ element: element.id, terminal: name }), nets.size);
  }
  return {
    map,
    elements,
    conductors,
    // Each terminal is a node of its own: a conductor is an edge, so that it can be looked at by itself.
    nodeOf: (element, terminal) => nets.get(keyOf({ element, terminal })) ?? -1,
    nodeCount: nets.size,
    wired: [...conductors.values()].filter(({ from, to }) => nets.has(keyOf(from)) && nets.has(keyOf(to))),
    terminals: (element) => terminalsById.get(element) ?? [],
    ofKind: (kind) =>
      [...elements.values()].filter((each): each is ElementOf<typeof kind> => each.kind === kind),
    name: (id) => {
      const label = elements.get(id)?.label ?? "";
      return label === "" ? id : `${id} (${label})`;
    },
  };
}
