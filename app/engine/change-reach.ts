import type { BenchCheck, CheckFamily } from "./bench-check";
import type { MapChange } from "./compare-maps";
import type { EnergyMap } from "./energy-map";

/**
 * How far a change reaches beyond what it is wired to. Leakage, insulation, stored charge and energy going backwards cross
 * loads, capacitors and transformers: for these everything that hangs together in either map is touched.
 */

const wide: readonly CheckFamily[] = ["leakage", "insulation", "stored-charge", "reverse-current"];
/** Checks of the thing itself that even a part of the same data, only named otherwise, may answer differently. */
const ofTheThing: readonly string[] = ["heat-surface", "touch-current"];

export interface Reach {
  /** Every change, also of names alone: the part may have been swapped for another. */
  all: string[];
  /** For each id the changes of more than a name that it hangs together with. */
  joined: Map<string, Set<string>>;
  /** The same with changes of names. */
  joinedOrNamed: Map<string, Set<string>>;
}

export function reachOf(changes: MapChange[], before: EnergyMap, after: EnergyMap): Reach {
  const groups = groupsOf(before, after);
  const isName = ({ change, fields }: MapChange) =>
    change === "changed" && fields.every(({ field }) => field === "label");
  const spread = (some: MapChange[]) => {
    const reached = new Map<string, Set<string>>();
    for (const { id } of some) {
      for (const each of groups.get(id) ?? [id]) reached.set(each, (reached.get(each) ?? new Set()).add(id));
    }
    return reached;
  };
  return {
    all: changes.map(({ id }) => id),
    joined: spread(changes.filter((each) => !isName(each))),
    joinedOrNamed: spread(changes),
  };
}

/** Why a check is touched though nothing of its own, nor anything wired to it, changed. */
export function farther(check: BenchCheck, reach: Reach): string[] {
  const id = check.key.split(":")[0] ?? "";
  if (id === "visual-wiring")
    return reach.all.length === 0
      ? []
      : [`The wiring is looked at again after any change: ${inOrder(reach.all)}.`];
  const joined = ofTheThing.includes(id)
    ? reach.joinedOrNamed
    : wide.includes(check.family)
      ? reach.joined
      : null;
  if (joined === null) return [];
  const ids = [...check.subjects.elements, ...check.subjects.conductors];
  const by = new Set(ids.flatMap((each) => [...(joined.get(each) ?? [])]));
  return by.size === 0
    ? []
    : [`It hangs together with what was changed, through other parts: ${inOrder([...by])}.`];
}

const inOrder = (ids: string[]) => [...new Set(ids)].sort().join(", ");

/** For each element and conductor the ids of all that hangs together with it in the two maps taken together. */
function groupsOf(before: EnergyMap, after: EnergyMap): Map<string, string[]> {
  const neighbours = new Map<string, Set<string>>();
  const join = (a: string, b: string) => {
    neighbours.set(a, (neighbours.get(a) ?? new Set()).add(b));
    neighbours.set(b, (neighbours.get(b) ?? new Set()).add(a));
  };
  for (const { id, from, to } of [...before.conductors, ...after.conductors]) {
    join(id, from.element);
    join(id, to.element);
  }
  const groups = new Map<string, string[]>();
  for (const start of neighbours.keys()) {
    if (groups.has(start)) continue;
    const group = [start];
    const seen = new Set(group);
    for (let head = 0; head < group.length; head++) {
      for (const next of neighbours.get(group[head] ?? "") ?? []) {
        if (seen.has(next)) continue;
        seen.add(next);
        group.push(next);
      }
    }
    for (const id of group) groups.set(id, group);
  }
  return groups;
}
