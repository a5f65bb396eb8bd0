import { asc, eq, inArray } from "drizzle-orm";
import { z } from "zod";
import { type Reader, tables } from "~/db/client.server";
import type { Accuracy } from "~/engine/verdict";
import type { ObservationView } from "./sheet-view";

const { instruments, observations, people, revisions } = tables;

const accuracySchema = z.object({ percent: z.number(), digits: z.number(), resolution: z.number() });

function readAccuracy(stored: unknown): Accuracy | null {
  return stored === null || stored === undefined ? null : accuracySchema.parse(stored);
}

/**
 * Every observation of a unit (or of several), over all revisions, the earliest first. Carried-over rows are shown with
 * the content of the reading they point to, however many revisions back it was taken.
 */
export async function listObservations(
  db: Reader,
  unitId: number | readonly number[],
): Promise<UnitObservation[]> {
  const rows = await db
    .select({
      row: observations,
      revision: revisions.number,
      by: people.name,
      instrument: { name: instruments.name, serial: instruments.serial, kind: instruments.kind },
    })
    .from(observations)
    .innerJoin(revisions, eq(revisions.id, observations.revisionId))
    .innerJoin(people, eq(people.id, observations.byId))
    .leftJoin(instruments, eq(instruments.id, observations.instrumentId))
    .where(inArray(observations.unitId, [unitId].flat()))
    .orderBy(asc(observations.id));

  const byId = new Map<number, UnitObservation>();
  for (const { row, revision, by, instrument } of rows) {
    if (row.kind === "carried-over") {
      // A pointer always leads to an earlier row, which has been read by now.
      const origin = row.carriedFromId === null ? undefined : byId.get(row.carriedFromId);
      if (!origin) throw new Error(`Observation ${row.id} was carried over from a row that isn't there.`);
      byId.set(row.id, {
        ...origin,
        id: row.id,
        revisionId: row.revisionId,
        correctsId: row.correctsId,
        carried: { fromId: row.carriedFromId ?? origin.id, by, byId: row.byId, at: row.at },
      });
      continue;
    }
    byId.set(row.id, {
      id: row.id,
      revisionId: row.revisionId,
      checkKey: row.checkKey,
      kind: row.kind,
      value: row.value,
      bound: row.bound,
      unit: row.unit,
      instrument:
        row.instrumentId !== null && instrument !== null && row.calibrationDue !== null
          ? { id: row.instrumentId, ...instrument, calibrationDue: row.calibrationDue }
          : null,
      accuracy: readAccuracy(row.accuracy),
      conditions: row.conditions,
      conforms: row.conforms === null ? null : row.conforms === "yes",
      reason: row.reason,
      note: row.note,
      revision,
      by,
      byId: row.byId,
      at: row.at,
      correctsId: row.correctsId,
      carried: null,
    });
  }
  return [...byId.values()];
}

/** An observation with the revision whose sheet it stands on. */
export type UnitObservation = ObservationView & { revisionId: number };
