import { and, eq, sql } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { EnergyMap } from "~/engine/energy-map";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError } from "~/services/errors";
import { actOnUnit } from "~/services/unit-act.server";
import { loadRevision } from "./load-revision.server";

const { revisions } = tables;

export interface SaveMapInput {
  unitNumber: number;
  /** The revision that the editor shows; another one by now means that the unit has moved on. */
  revision: number;
  /** The edition that the editor started from. */
  edition: number;
  map: EnergyMap;
}

export interface SavedMap {
  edition: number;
  /** Of the unit, for the forms that follow. */
  version: number;
  savedAt: Date;
}

/** The map was saved elsewhere since this editor read it; `theirs` is what stands there now. */
export class MapConflictError extends ConflictError {
  constructor(
    readonly theirs: EnergyMap,
    readonly edition: number,
  ) {
    super("This map was changed in another window or on another device since you opened it here.");
  }
}

/**
 * Saves the draft of a map, whole. Photos and facts may be added meanwhile without a conflict: only the map's own
 * edition counts. Leaves no entry in the trail: the submission pins the map that counts.
 *
 * @throws NotFoundError, ForbiddenError, ConflictError, MapConflictError
 */
export function saveMap(context: ServiceContext, input: SaveMapInput): Promise<SavedMap> {
  return actOnUnit(context, "unit.edit", { unitNumber: input.unitNumber }, async ({ tx, unit, at }) => {
    if (input.revision !== unit.revision) {
      throw new ConflictError(
        `The unit is at revision ${unit.revision} by now; this editor shows ${input.revision}.`,
      );
    }
    const [answer] = await tx
      .update(revisions)
      .set({ map: input.map, mapEdition: sql`${revisions.mapEdition} + 1` })
      .where(
        and(
          eq(revisions.unitId, unit.id),
          eq(revisions.number, unit.revision),
          eq(revisions.mapEdition, input.edition),
        ),
      );
    if (answer.affectedRows !== 1) {
      const standing = await loadRevision(tx, unit);
      throw new MapConflictError(standing.map, standing.mapEdition);
    }
    return { result: { edition: input.edition + 1, version: unit.version + 1, savedAt: at }, act: null };
  });
}
