import { type Reader, tables } from "~/db/client.server";
import type { BenchCheck } from "~/engine/bench-check";
import { affectedChecks, compareMaps, type MapChange } from "~/engine/compare-maps";
import type { UnitFacts } from "~/engine/unit-facts";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError, InvalidInputError } from "~/services/errors";
import { actOnUnit, type UnitActInput, type UnitRow } from "~/services/unit-act.server";
import type { LoadedRevision } from "~/services/units/load-revision.server";
import { loadSheet } from "./load-sheet.server";
import type { LineVerdict, ObservationView, SheetLine } from "./sheet-view";

const { observations } = tables;

/** What is to be done with one check of the new revision. */
export type CarryChoice =
  /** Answered on this revision already, by a new reading or by carrying over. */
  | { kind: "answered" }
  /** Nothing to carry: it is new, or the earlier revision left it without a passing answer. */
  | { kind: "do-again"; because: string[] }
  /** The change can't affect it; an inspector may carry the earlier answer over. */
  | { kind: "may-carry" };

export interface CarryLine {
  check: BenchCheck;
  choice: CarryChoice;
  earlier: { observation: ObservationView; verdict: LineVerdict } | null;
  line: SheetLine;
}

export interface RevisionChanges {
  before: LoadedRevision;
  after: LoadedRevision;
  mapChanges: MapChange[];
  /** Facts of the unit or the rule set that differ, as sentences. They affect every check. */
  otherChanges: string[];
  lines: CarryLine[];
}

/**
 * What changed since the revision before, and which checks that can touch. Null on a unit's first revision.
 *
 * @param db an open transaction, where it must be read under the unit's lock
 */
export async function loadChanges(
  services: Pick<ServiceContext, "db" | "workshop">,
  unit: UnitRow,
  db: Reader = services.db,
): Promise<RevisionChanges | null> {
  if (unit.revision < 2) return null;
  const after = await loadSheet(services, unit, unit.revision, db);
  const before = await loadSheet(services, unit, unit.revision - 1, db);
  const otherChanges = [
    ...factChanges(before.revision.facts, after.revision.facts),
    ...ruleSetChanges(before.revision, after.revision),
  ];
  const affected = new Map(
    affectedChecks(before.revision.map, after.revision.map, after.revision.ruleSet, after.revision.facts).map(
      (each) => [each.key, each.affected ? each.because : []],
    ),
  );
  const earlierLines = new Map(before.lines.map((line) => [line.check.key, line]));
  return {
    before: before.revision,
    after: after.revision,
    mapChanges: compareMaps(before.revision.map, after.revision.map),
    otherChanges,
    lines: after.lines.map((line): CarryLine => {
      const earlier = earlierLines.get(line.check.key);
      const because = [...otherChanges, ...(affected.get(line.check.key) ?? ["The check is new."])];
      return {
        check: line.check,
        line,
        earlier: earlier?.observation ? { observation: earlier.observation, verdict: earlier.verdict } : null,
        choice: choose(line, earlier, before.revision.number, because),
      };
    }),
  };
}

const carriable: readonly LineVerdict[] = ["pass", "not-applicable", "not-possible"];

function choose(
  line: SheetLine,
  earlier: SheetLine | undefined,
  earlierRevision: number,
  because: string[],
): CarryChoice {
  if (line.observation) return { kind: "answered" };
  const reasons = [...because];
  if (!earlier?.observation) {
    reasons.push("It was not answered on the revision before.");
  } else {
    if (!carriable.includes(earlier.verdict)) {
      reasons.push(
        earlier.verdict === "fail"
          ? "It failed on the revision before."
          : "It was undecided on the revision before.",
      );
    }
    // What was found wrong was mended by hand, perhaps without any change of the map.
    for (const finding of earlier.findings) {
      if (finding.severity === "advice") continue;
      if (finding.closing === null) reasons.push(`Finding ${finding.number} on it is open.`);
      else if (finding.revision === earlierRevision)
        reasons.push(`Finding ${finding.number} was raised on it.`);
    }
  }
  return reasons.length > 0 ? { kind: "do-again", because: reasons } : { kind: "may-carry" };
}

/** Facts that differ, whatever their name: a new fact of the engine is compared without a change here. */
function factChanges(before: UnitFacts, after: UnitFacts): string[] {
  const old: Record<string, unknown> = { ...before };
  const now: Record<string, unknown> = { ...after };
  return [...new Set([...Object.keys(old), ...Object.keys(now)])]
    .filter((name) => (old[name] ?? null) !== (now[name] ?? null))
    .map(
      (name) => `The unit's facts changed: ${words(name)} was ${shown(old[name])}, is ${shown(now[name])}.`,
    );
}

function ruleSetChanges(before: LoadedRevision, after: LoadedRevision): string[] {
  if (before.ruleSet.key === after.ruleSet.key && before.ruleSet.version === after.ruleSet.version) return [];
  return [
    `It is judged by other limits: “${before.ruleSet.title}”, version ${before.ruleSet.version}, before; “${after.ruleSet.title}”, version ${after.ruleSet.version}, now.`,
  ];
}

function words(name: string): string {
  return name.replace(/([A-Z])/g, " $1").toLowerCase();
}

function shown(value: unknown): string {
  return value === null || value === undefined ? "not known" : String(value);
}

/**
 * Carries earlier answers over to this revision, one row a check, each pointing to the observation it repeats. The
 * list is worked out again under the lock: a check that the change can affect is refused.
 *
 * @throws ForbiddenError, ConflictError, InvalidInputError
 * @returns how many were carried over
 */
export function carryOver(
  context: ServiceContext,
  input: UnitActInput & { checkKeys: readonly string[] },
): Promise<number> {
  return actOnUnit(context, "bench.work", input, async ({ tx, unit, at }) => {
    const keys = [...new Set(input.checkKeys)];
    if (keys.length === 0) throw new InvalidInputError("checks", "Tick the checks to carry over.");
    const changes = await loadChanges(context, unit, tx);
    if (!changes) throw new ConflictError("This is the first revision: there is nothing to carry over.");
    const carried: { check: string; observation: number; from: number }[] = [];
    for (const key of keys) {
      const line = changes.lines.find(({ check }) => check.key === key);
      if (!line || line.choice.kind !== "may-carry" || !line.earlier) {
        throw new InvalidInputError("checks", `${line?.check.title ?? key}: ${refusal(line)}`);
      }
      const [row] = await tx
        .insert(observations)
        .values({
          unitId: unit.id,
          revisionId: changes.after.id,
          checkKey: key,
          kind: "carried-over",
          carriedFromId: line.earlier.observation.id,
          byId: context.person.id,
          at,
        })
        .$returningId();
      if (!row) throw new Error("The observation got no id.");
      carried.push({ check: key, observation: row.id, from: line.earlier.observation.id });
    }
    return {
      result: carried.length,
      act: "bench.carry-over",
      detail: { revision: unit.revision, carried },
    };
  });
}

function refusal(line: CarryLine | undefined): string {
  if (!line) return "this revision has no such check.";
  if (line.choice.kind === "answered") return "it has been answered on this revision already.";
  return line.choice.kind === "do-again"
    ? `it has to be done again. ${line.choice.because.join(" ")}`
    : "there is no earlier answer.";
}
