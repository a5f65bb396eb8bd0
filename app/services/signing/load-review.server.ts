import { asc, eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import { loadSheet } from "~/services/bench/load-sheet.server";
import type { FindingView, Sheet } from "~/services/bench/sheet-view";
import type { ServiceContext } from "~/services/context.server";
import type { FileView } from "~/services/files/list-files.server";
import { type LicenceView, lockLicencesOf } from "~/services/people/licences.server";
import type { StandingUnit } from "~/services/unit-act.server";
import { listRevisions, type RevisionView } from "~/services/units/load-revision.server";

const { benchTurns, people, revisions } = tables;

export interface BenchTurnView {
  inspector: string;
  revision: number;
  takenAt: Date;
  endedAt: Date | null;
}

/** Everything that a decision on a unit rests on: what the review page shows, the guards weigh and the record holds. */
export interface Review {
  unit: StandingUnit;
  builder: string;
  sheet: Sheet;
  findings: FindingView[];
  files: FileView[];
  revisions: RevisionView[];
  turns: BenchTurnView[];
  /** Of the person who looks: theirs alone can carry a signature. */
  licences: LicenceView[];
}

/**
 * Reads a unit's review for the person of `services`.
 *
 * @param db an open transaction, where it must be read under the unit's lock
 */
export async function loadReview(
  services: ServiceContext,
  unit: StandingUnit,
  db: Reader = services.db,
): Promise<Review> {
  const [builder] = await db.select({ name: people.name }).from(people).where(eq(people.id, unit.builderId));
  const sheet = await loadSheet(services, unit, undefined, db);
  return {
    unit,
    builder: builder?.name ?? "",
    sheet,
    findings: sheet.findings,
    files: sheet.files,
    revisions: await listRevisions(db, unit.id),
    turns: await listTurns(db, unit.id),
    licences: await lockLicencesOf(db, services.workshop.id, services.person.id),
  };
}

/** Who had the unit on the bench and when, the earliest first. */
function listTurns(db: Reader, unitId: number): Promise<BenchTurnView[]> {
  return db
    .select({
      inspector: people.name,
      revision: revisions.number,
      takenAt: benchTurns.takenAt,
      endedAt: benchTurns.endedAt,
    })
    .from(benchTurns)
    .innerJoin(people, eq(people.id, benchTurns.inspectorId))
    .innerJoin(revisions, eq(revisions.id, benchTurns.revisionId))
    .where(eq(benchTurns.unitId, unitId))
    .orderBy(asc(benchTurns.id));
}
