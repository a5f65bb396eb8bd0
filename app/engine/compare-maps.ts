import { farther, reachOf } from "./change-reach";
import { deriveBenchSheet } from "./bench-sheet";
import type { BenchCheck } from "./bench-check";
import type { EnergyMap } from "./energy-map";
import type { RuleSet } from "./rule-set";
import type { UnitFacts } from "./unit-facts";

export interface FieldChange {
  field: string;
  before: unknown;
  after: unknown;
}

export interface MapChange {
  subject: "element" | "conductor";
  id: string;
  change: "added" | "removed" | "changed";
  /** Field by field; empty for added and removed. */
  fields: FieldChange[];
  text: string;
}

/** What differs between two maps: elements first, then conductors, each by id. */
export function compareMaps(before: EnergyMap, after: EnergyMap): MapChange[] {
  return [
    ...changesOf("element", before.elements, after.elements),
    ...changesOf("conductor", before.conductors, after.conductors),
  ];
}

function changesOf(
  subject: MapChange["subject"],
  before: { id: string }[],
  after: { id: string }[],
): MapChange[] {
  const old = new Map(before.map((each) => [each.id, each]));
  const now = new Map(after.map((each) => [each.id, each]));
  const ids = [...new Set([...old.keys(), ...now.keys()])].sort((a, b) =>
    a.localeCompare(b, "en", { numeric: true }),
  );
  return ids.flatMap((id): MapChange[] => {
    const was = old.get(id);
    const is = now.get(id);
    if (was === undefined) return [{ subject, id, change: "added", fields: [], text: `${id} was added.` }];
    if (is === undefined) return [{ subject, id, change: "removed", fields: [], text: `${id} was removed.` }];
    const fields = fieldChanges(was, is);
    if (fields.length === 0) return [];
    return [
      {
        subject,
        id,
        change: "changed",
        fields,
        text: `${id}: ${fields.map(({ field }) => field).join(", ")} changed.`,
      },
    ];
  });
}

function fieldChanges(before: object, after: object): FieldChange[] {
  const old: Record<string, unknown> = { ...before };
  const now: Record<string, unknown> = { ...after };
  return [...new Set([...Object.keys(old), ...Object.keys(now)])]
    .filter((field) => stable(old[field]) !== stable(now[field]))
    .map((field) => ({ field, before: old[field] ?? null, after: now[field] ?? null }));
}

/** Text that is the same for the same content, whatever the order of its keys. */
function stable(value: unknown): string {
  if (value === undefined || value === null) return "null";
  if (Array.isArray(value)) return `[${value.map(stable).join(",")}]`;
  if (typeof value === "object") {
    return `{${Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, each]) => `${JSON.stringify(key)}:${stable(each)}`)
      .join(",")}}`;
  }
  return JSON.stringify(value);
}

export interface AffectedCheck {
  key: string;
  affected: boolean;
  because: string[];
}

/** For each check of the new sheet: whether the changes between the maps can touch it, and why. */
export function affectedChecks(
  before: EnergyMap,
  after: EnergyMap,
  ruleSet: RuleSet,
  facts: UnitFacts,
): AffectedCheck[] {
  const old = new Map(deriveBenchSheet(before, ruleSet, facts).map((check) => [check.key, check]));
  const changes = compareMaps(before, after);
  const touched = touchedBy(changes, before, after);
  const reach = reachOf(changes, before, after);
  return deriveBenchSheet(after, ruleSet, facts).map((check) => {
    const direct = [...differences(old.get(check.key), check), ...nearby(check, touched)];
    const because = direct.length > 0 ? direct : farther(check, reach);
    return { key: check.key, affected: because.length > 0, because };
  });
}

function differences(was: BenchCheck | undefined, is: BenchCheck): string[] {
  if (was === undefined) return ["This check is new."];
  const because: string[] = [];
  const limitOf = (check: BenchCheck) => (check.asks.kind === "reading" ? check.asks.limit : null);
  if (stable(limitOf(was)) !== stable(limitOf(is))) because.push("Its limit is another one.");
  if (stable(was.computed) !== stable(is.computed)) because.push("The engine's own answer differs.");
  if (stable(was.subjects) !== stable(is.subjects)) because.push("It is about other parts.");
  if (because.length === 0 && stable(was) !== stable(is)) because.push("Its method or reasons differ.");
  return because;
}

/** Element ids that a change reaches, each with the id of the change: itself, or joined to it by a conductor in either map. */
function touchedBy(changes: MapChange[], before: EnergyMap, after: EnergyMap): Map<string, Set<string>> {
  const touched = new Map<string, Set<string>>();
  const mark = (id: string, by: string) => touched.set(id, (touched.get(id) ?? new Set()).add(by));
  const conductors = [...before.conductors, ...after.conductors];
  for (const { subject, id, fields, change } of changes) {
    if (change === "changed" && fields.every(({ field }) => field === "label" || field === "example"))
      continue;
    mark(id, id);
    for (const { id: conductor, from, to } of conductors) {
      if (subject === "conductor" ? conductor === id : from.element === id || to.element === id) {
        mark(conductor, id);
        mark(from.element, id);
        mark(to.element, id);
      }
    }
  }
  return touched;
}

function nearby(check: BenchCheck, touched: Map<string, Set<string>>): string[] {
  const ids = [...check.subjects.elements, ...check.subjects.conductors];
  const by = new Set(ids.flatMap((id) => [...(touched.get(id) ?? [])]));
  return by.size === 0
    ? []
    : [`It concerns what was changed or what is joined to it: ${[...by].sort().join(", ")}.`];
}
