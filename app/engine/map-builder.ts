import { newElement } from "./elements";
import {
  elementSchema,
  type Conductor,
  type Element,
  type ElementKind,
  type ElementOf,
  type EnergyMap,
} from "./energy-map";

/** An element with the data given and every other datum unknown. Throws when the data do not fit: for maps written in code. */
export function part<Kind extends ElementKind>(
  kind: Kind,
  id: string,
  label: string,
  data: Partial<Omit<ElementOf<Kind>, "id" | "label" | "kind" | "example">> = {},
): Element {
  return elementSchema.parse({ ...newElement(kind, id), ...data, label });
}

/**
 * A conductor from "X1.L" to "F1.1". The area is a number of mm²; the length is in metres.
 */
export function wire(
  id: string,
  from: string,
  to: string,
  circuit: Conductor["circuit"],
  mm2: number | null,
  lengthM: number | null,
  insulation: Conductor["insulation"] = "pvc",
): Conductor {
  return {
    id,
    from: endOf(from),
    to: endOf(to),
    area: mm2 === null ? null : { mm2 },
    lengthM,
    insulation,
    circuit,
  };
}

function endOf(text: string): Conductor["from"] {
  const dot = text.indexOf(".");
  return { element: text.slice(0, dot), terminal: text.slice(dot + 1) };
}

export function mapOf(elements: Element[], conductors: Conductor[]): EnergyMap {
  return { format: "mainsgate-energy-map", version: 1, elements, conductors };
}

/** A copy of a map with some data of one element replaced. */
export function withData(map: EnergyMap, id: string, data: Record<string, unknown>): EnergyMap {
  return {
    ...map,
    elements: map.elements.map((element) =>
      element.id === id ? elementSchema.parse({ ...element, ...data }) : element,
    ),
  };
}

/** A copy of a map without some elements and without every conductor that led to them, and without the conductors named. */
export function without(map: EnergyMap, ...ids: string[]): EnergyMap {
  const gone = new Set(ids);
  return {
    ...map,
    elements: map.elements.filter(({ id }) => !gone.has(id)),
    conductors: map.conductors.filter(
      ({ id, from, to }) => !gone.has(id) && !gone.has(from.element) && !gone.has(to.element),
    ),
  };
}

/** A copy of a map with more elements and conductors. */
export function extended(map: EnergyMap, elements: Element[], conductors: Conductor[]): EnergyMap {
  return { ...map, elements: [...map.elements, ...elements], conductors: [...map.conductors, ...conductors] };
}
