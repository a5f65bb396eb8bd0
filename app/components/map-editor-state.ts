import { elementKinds, newElement, terminalsOf } from "~/engine/elements";
import {
  type Conductor,
  elementSchema,
  type Element,
  type ElementKind,
  type EnergyMap,
  type TerminalReference,
} from "~/engine/energy-map";

/** A map being edited, with the way back. */
export interface EditorState {
  map: EnergyMap;
  past: { map: EnergyMap; what: string }[];
  future: { map: EnergyMap; what: string }[];
  /** What the last change was made to: further typing in the same field is one step back, not twenty. */
  streak: string | null;
}

export type EditorAction =
  | { type: "add-element"; kind: ElementKind; id: string }
  | { type: "change-element"; id: string; field: string; value: unknown }
  | { type: "rename"; subject: Subject; id: string; to: string }
  | { type: "duplicate"; subject: Subject; id: string; as: string }
  | { type: "remove"; subject: Subject; id: string }
  | { type: "move"; subject: Subject; id: string; by: -1 | 1 }
  | { type: "add-conductor"; conductor: Conductor }
  | { type: "change-conductor"; id: string; changes: Partial<Omit<Conductor, "id">> }
  /** The figures are those of the part itself: of one element, or of all. */
  | { type: "confirm-figures"; id: string | null }
  | { type: "replace"; map: EnergyMap; what: string }
  | { type: "undo" }
  | { type: "redo" };

export type Subject = "element" | "conductor";

const STEPS_BACK = 100;

export function startEditing(map: EnergyMap): EditorState {
  return { map, past: [], future: [], streak: null };
}

/** The next state; the same one when the action changes nothing (an unknown id, the end of a list, a value out of bounds). */
export function editMap(state: EditorState, action: EditorAction): EditorState {
  switch (action.type) {
    case "undo":
      return stepBack(state);
    case "redo":
      return stepForward(state);
    default: {
      const map = changeMap(state.map, action);
      if (map === state.map) return state;
      const streak = streakOf(action);
      const continues = streak !== null && streak === state.streak;
      return {
        map,
        past: continues
          ? state.past
          : [...state.past, { map: state.map, what: describe(action, state.map) }].slice(-STEPS_BACK),
        future: [],
        streak,
      };
    }
  }
}

function stepBack(state: EditorState): EditorState {
  const last = state.past.at(-1);
  if (!last) return state;
  return {
    map: last.map,
    past: state.past.slice(0, -1),
    future: [...state.future, { map: state.map, what: last.what }],
    streak: null,
  };
}

function stepForward(state: EditorState): EditorState {
  const next = state.future.at(-1);
  if (!next) return state;
  return {
    map: next.map,
    past: [...state.past, { map: state.map, what: next.what }],
    future: state.future.slice(0, -1),
    streak: null,
  };
}

type MapAction = Exclude<EditorAction, { type: "undo" } | { type: "redo" }>;

function changeMap(map: EnergyMap, action: MapAction): EnergyMap {
  switch (action.type) {
    case "add-element":
      return { ...map, elements: [...map.elements, newElement(action.kind, action.id)] };
    case "change-element":
      return changeElement(map, action.id, action.field, action.value);
    case "rename":
      return rename(map, action.subject, action.id, action.to);
    case "duplicate":
      return duplicate(map, action.subject, action.id, action.as);
    case "remove":
      return remove(map, action.subject, action.id);
    case "move":
      return action.subject === "element"
        ? moved(map, { elements: shift(map.elements, action.id, action.by) })
        : moved(map, { conductors: shift(map.conductors, action.id, action.by) });
    case "add-conductor":
      return { ...map, conductors: [...map.conductors, action.conductor] };
    case "change-conductor":
      return {
        ...map,
        conductors: map.conductors.map((each) =>
          each.id === action.id ? { ...each, ...action.changes } : each,
        ),
      };
    case "confirm-figures":
      return confirmFigures(map, action.id);
    case "replace":
      return action.map;
  }
}

function changeElement(map: EnergyMap, id: string, field: string, value: unknown): EnergyMap {
  const element = map.elements.find((each) => each.id === id);
  if (!element) return map;
  // Whoever enters a datum has the part at hand, and the row is theirs from then on; a name tells nothing of figures.
  const base = field === "label" ? element : ownFigures(element);
  const changed = elementSchema.safeParse({ ...base, [field]: value });
  if (!changed.success) return map;
  return { ...map, elements: map.elements.map((each) => (each.id === id ? changed.data : each)) };
}

/** A starter's map as the editor takes it: every figure in it is an example until somebody makes it their own. */
export function asExample(map: EnergyMap): EnergyMap {
  return { ...map, elements: map.elements.map((element) => ({ ...element, example: true })) };
}

function ownFigures(element: Element): Element {
  const own = { ...element };
  delete own.example;
  return own;
}

function confirmFigures(map: EnergyMap, id: string | null): EnergyMap {
  const marked = (each: Element) => each.example === true && (id === null || each.id === id);
  if (!map.elements.some(marked)) return map;
  return { ...map, elements: map.elements.map((each) => (marked(each) ? ownFigures(each) : each)) };
}

function rename(map: EnergyMap, subject: Subject, id: string, to: string): EnergyMap {
  if (id === to || isTaken(map, to)) return map;
  if (subject === "conductor") {
    return {
      ...map,
      conductors: map.conductors.map((each) => (each.id === id ? { ...each, id: to } : each)),
    };
  }
  const follow = (end: TerminalReference) => (end.element === id ? { ...end, element: to } : end);
  return {
    ...map,
    elements: map.elements.map((each) => {
      const named = each.id === id ? { ...each, id: to } : each;
      return named.kind === "switch" && named.coilFedBy === id ? { ...named, coilFedBy: to } : named;
    }),
    conductors: map.conductors.map((each) => ({ ...each, from: follow(each.from), to: follow(each.to) })),
  };
}

function duplicate(map: EnergyMap, subject: Subject, id: string, as: string): EnergyMap {
  return subject === "element"
    ? moved(map, { elements: withCopy(map.elements, id, as) })
    : moved(map, { conductors: withCopy(map.conductors, id, as) });
}

function withCopy<Row extends { id: string }>(rows: Row[], id: string, as: string): Row[] {
  return rows.flatMap((row) => (row.id === id ? [row, { ...row, id: as }] : [row]));
}

function remove(map: EnergyMap, subject: Subject, id: string): EnergyMap {
  if (subject === "conductor") {
    return { ...map, conductors: map.conductors.filter((each) => each.id !== id) };
  }
  return {
    ...map,
    elements: map.elements.filter((each) => each.id !== id),
    // A connection can't end in nothing; the way back brings both again.
    conductors: map.conductors.filter((each) => each.from.element !== id && each.to.element !== id),
  };
}

function shift<Row extends { id: string }>(rows: Row[], id: string, by: -1 | 1): Row[] {
  const from = rows.findIndex((row) => row.id === id);
  const to = from + by;
  const row = rows[from];
  if (!row || to < 0 || to >= rows.length) return rows;
  const rest = rows.filter((each) => each !== row);
  return [...rest.slice(0, to), row, ...rest.slice(to)];
}

function moved(map: EnergyMap, rows: Partial<Pick<EnergyMap, "elements" | "conductors">>): EnergyMap {
  const same =
    (rows.elements ?? map.elements) === map.elements &&
    (rows.conductors ?? map.conductors) === map.conductors;
  return same ? map : { ...map, ...rows };
}

function streakOf(action: MapAction): string | null {
  if (action.type === "change-element") return `element ${action.id} ${action.field}`;
  if (action.type === "change-conductor")
    return `conductor ${action.id} ${Object.keys(action.changes).join()}`;
  return null;
}

function describe(action: MapAction, map: EnergyMap): string {
  switch (action.type) {
    case "add-element":
      return `${action.id} added`;
    case "add-conductor":
      return `${action.conductor.id} added`;
    case "change-element":
    case "change-conductor":
      return `${action.id} changed`;
    case "rename":
      return `${action.id} renamed`;
    case "duplicate":
      return `${action.as} copied from ${action.id}`;
    case "move":
      return `${action.id} moved`;
    case "confirm-figures":
      return action.id === null ? "All figures confirmed" : `Figures of ${action.id} confirmed`;
    case "replace":
      return action.what;
    case "remove": {
      if (action.subject === "conductor") return `${action.id} removed`;
      const along = map.conductors.filter(
        (each) => each.from.element === action.id || each.to.element === action.id,
      ).length;
      const connections = along === 1 ? "its connection" : `its ${along} connections`;
      return `${action.id}${along === 0 ? "" : ` and ${connections}`} removed`;
    }
  }
}

/** Whether an element or a conductor bears this id. */
export function isTaken(map: EnergyMap, id: string): boolean {
  return map.elements.some((each) => each.id === id) || map.conductors.some((each) => each.id === id);
}

/** The first free id with a prefix: F1, F2, F3 … */
export function nextId(map: EnergyMap, prefix: string): string {
  for (let number = 1; ; number++) {
    const id = `${prefix}${number}`;
    if (!isTaken(map, id)) return id;
  }
}

/** A free id for another element like this one. */
export function nextElementId(map: EnergyMap, kind: ElementKind): string {
  return nextId(map, elementKinds[kind].idPrefix);
}

/** "F1" with its name, as lists of terminals show it. */
export function nameOf(element: Element): string {
  return element.label === "" ? element.id : `${element.id} ${element.label}`;
}

/** The circuit that two terminals suggest; null when they leave it open. A suggestion: the person sees and may change it. */
export function suggestCircuit(
  map: EnergyMap,
  from: TerminalReference,
  to: TerminalReference,
): Conductor["circuit"] | null {
  const roles = [from, to].map((end) => {
    const element = map.elements.find((each) => each.id === end.element);
    return element && terminalsOf(element).find((terminal) => terminal.name === end.terminal)?.role;
  });
  if (roles.includes("earth")) return "earth";
  if (roles.includes("line") || roles.includes("neutral")) return "mains";
  if (roles.includes("plus") || roles.includes("minus")) return "elv";
  const neighbours = map.conductors.filter((each) =>
    [each.from, each.to].some((end) => end.element === from.element || end.element === to.element),
  );
  const circuits = new Set(neighbours.map((each) => each.circuit));
  const [only] = circuits;
  return circuits.size === 1 && only ? only : null;
}
