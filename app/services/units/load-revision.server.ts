import { and, asc, eq, inArray } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import { type EnergyMap, energyMapSchema } from "~/engine/energy-map";
import { findRuleSet, type RuleSet } from "~/engine/rule-set";
import type { UncertaintyPolicy } from "~/engine/verdict";
import { type UnitFacts, unitFactsSchema } from "~/engine/unit-facts";
import { NotFoundError } from "~/services/errors";
import type { UnitRow } from "~/services/unit-act.server";

const { people, revisions, units } = tables;

/** Why the revision before was sent back, which opened this one. */
export interface SendBack {
  reason: string;
  by: string;
}

export interface LoadedRevision {
  id: number;
  number: number;
  map: EnergyMap;
  /** Counts the saves of the draft. */
  mapEdition: number;
  /** The rule set that this revision is judged by; pinned at its submission. */
  ruleSet: RuleSet;
  /** How accuracies become uncertainties; pinned with the rule set, null while it is a draft. */
  accuracyPolicy: UncertaintyPolicy | null;
  /** As submitted; of a draft, the unit's facts of now. */
  facts: UnitFacts;
  createdAt: Date;
  submittedAt: Date | null;
  /** Null for a unit's first revision. */
  sentBack: SendBack | null;
}

/** The facts of a unit that the engine reads, from its row. */
export function factsOf(unit: UnitRow): UnitFacts {
  return {
    supplyVolts: unit.supplyVolts,
    supplyHertz: unit.supplyHertz,
    protectionClass: unit.protectionClass,
    cordLengthM: unit.cordLengthM,
    cordAreaMm2: unit.cordAreaMm2,
    handheld: unit.handheld,
    altitudeM: unit.altitudeM,
  };
}

/** The rule set behind a key and a version of the database. @throws Error when this build doesn't hold it */
export function requireRuleSet(key: string, version: string): RuleSet {
  const ruleSet = findRuleSet(key, version);
  if (!ruleSet) throw new Error(`This build holds no rule set “${key}”, version ${version}.`);
  return ruleSet;
}

/**
 * One revision of a unit with everything that the engine needs; the current one when no number is given.
 *
 * @throws NotFoundError when the unit has no such revision
 */
export async function loadRevision(
  db: Reader,
  unit: UnitRow,
  number: number = unit.revision,
): Promise<LoadedRevision> {
  const [found] = await db
    .select({ row: revisions, sentBackBy: people.name })
    .from(revisions)
    .leftJoin(people, eq(people.id, revisions.sentBackById))
    .where(and(eq(revisions.unitId, unit.id), eq(revisions.number, number)));
  if (!found) throw new NotFoundError(`Revision ${number} of unit ${unit.number}`);
  return readRevision(found.row, unit, found.sentBackBy);
}

/** The current revisions of some units, in no order, by one query. */
export async function loadCurrentRevisions(
  db: Reader,
  rows: readonly UnitRow[],
): Promise<Map<number, LoadedRevision>> {
  if (rows.length === 0) return new Map();
  const found = await db
    .select({ row: revisions, unit: units, sentBackBy: people.name })
    .from(revisions)
    .innerJoin(units, and(eq(units.id, revisions.unitId), eq(units.revision, revisions.number)))
    .leftJoin(people, eq(people.id, revisions.sentBackById))
    .where(
      inArray(
        revisions.unitId,
        rows.map(({ id }) => id),
      ),
    );
  return new Map(found.map(({ row, unit, sentBackBy }) => [unit.id, readRevision(row, unit, sentBackBy)]));
}

function readRevision(
  row: typeof revisions.$inferSelect,
  unit: UnitRow,
  sentBackBy: string | null,
): LoadedRevision {
  return {
    id: row.id,
    number: row.number,
    map: energyMapSchema.parse(row.map),
    mapEdition: row.mapEdition,
    ruleSet: requireRuleSet(row.ruleSetKey, row.ruleSetVersion),
    accuracyPolicy: row.accuracyPolicy,
    facts: row.facts === null ? factsOf(unit) : unitFactsSchema.parse(row.facts),
    createdAt: row.createdAt,
    submittedAt: row.submittedAt,
    sentBack: sendBackOf(row.sentBackReason, sentBackBy),
  };
}

function sendBackOf(reason: string | null, by: string | null): SendBack | null {
  return reason === null ? null : { reason, by: by ?? "" };
}

export interface RevisionView {
  id: number;
  number: number;
  createdAt: Date;
  submittedAt: Date | null;
  /** Why the one before was sent back; null for the first. */
  sentBack: SendBack | null;
}

/** A unit's revisions, the first one first. */
export async function listRevisions(db: Reader, unitId: number): Promise<RevisionView[]> {
  const rows = await db
    .select({
      id: revisions.id,
      number: revisions.number,
      createdAt: revisions.createdAt,
      submittedAt: revisions.submittedAt,
      reason: revisions.sentBackReason,
      by: people.name,
    })
    .from(revisions)
    .leftJoin(people, eq(people.id, revisions.sentBackById))
    .where(eq(revisions.unitId, unitId))
    .orderBy(asc(revisions.number));
  return rows.map(({ reason, by, ...row }) => ({ ...row, sentBack: sendBackOf(reason, by) }));
}
