import { and, asc, eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import { type EnergyMap, energyMapSchema } from "~/engine/energy-map";
import { findRuleSet, type RuleSet } from "~/engine/rule-set";
import { type UnitFacts, unitFactsSchema } from "~/engine/unit-facts";
import { NotFoundError } from "~/services/errors";
import type { UnitRow } from "~/services/unit-act.server";

const { revisions } = tables;

export interface LoadedRevision {
  id: number;
  number: number;
  map: EnergyMap;
  /** Counts the saves of the draft. */
  mapEdition: number;
  /** The rule set that this revision is judged by; pinned at its submission. */
  ruleSet: RuleSet;
  /** As submitted; of a draft, the unit's facts of now. */
  facts: UnitFacts;
  createdAt: Date;
  submittedAt: Date | null;
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
  const [row] = await db
    .select()
    .from(revisions)
    .where(and(eq(revisions.unitId, unit.id), eq(revisions.number, number)));
  if (!row) throw new NotFoundError(`Revision ${number} of unit ${unit.number}`);
  return {
    id: row.id,
    number: row.number,
    map: energyMapSchema.parse(row.map),
    mapEdition: row.mapEdition,
    ruleSet: requireRuleSet(row.ruleSetKey, row.ruleSetVersion),
    facts: row.facts === null ? factsOf(unit) : unitFactsSchema.parse(row.facts),
    createdAt: row.createdAt,
    submittedAt: row.submittedAt,
  };
}

export interface RevisionView {
  id: number;
  number: number;
  createdAt: Date;
  submittedAt: Date | null;
}

/** A unit's revisions, the first one first. */
export function listRevisions(db: Reader, unitId: number): Promise<RevisionView[]> {
  return db
    .select({
      id: revisions.id,
      number: revisions.number,
      createdAt: revisions.createdAt,
      submittedAt: revisions.submittedAt,
    })
    .from(revisions)
    .where(eq(revisions.unitId, unitId))
    .orderBy(asc(revisions.number));
}
