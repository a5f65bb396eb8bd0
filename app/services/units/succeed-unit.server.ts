import type { ServiceContext } from "~/services/context.server";
import { GuardError } from "~/services/errors";
import { actOnUnit, type UnitActInput, type UnitRow } from "~/services/unit-act.server";
import { copyFormerBuilders } from "./former-builders.server";
import { insertUnit, takeUnitNumber } from "./insert-unit.server";
import { loadRevision } from "./load-revision.server";
import type { UnitDetails } from "./unit-details";
import { loadVersions } from "./versions.server";

/**
 * Begins a new version of a decided unit: a unit of its own, with the next number and a copy of facts and map. The old
 * one stays as it is, and in force where it was signed, until the new one is signed.
 *
 * @returns the new unit's number
 * @throws GuardError when a new version is in work or signed already, ForbiddenError, ConflictError
 */
export function succeedUnit(context: ServiceContext, input: UnitActInput): Promise<number> {
  return actOnUnit(context, "unit.succeed", input, async ({ tx, unit, at }) => {
    // The workshop's row is locked before the family is read: of two who begin at once, from whichever of its
    // versions, the second loses its snapshot, comes back and sees the first one's.
    const numbered = await takeUnitNumber(tx, context.workshop.id);
    const { obstacle } = await loadVersions(tx, unit);
    if (obstacle !== null) throw new GuardError([obstacle]);
    const { map } = await loadRevision(tx, unit);
    const made = await insertUnit(context, tx, {
      details: detailsOf(unit),
      map,
      numbered,
      at,
      predecessor: { id: unit.id, number: unit.number },
    });
    await copyFormerBuilders(tx, unit.id, made.id);
    return { result: made.number, detail: { successor: made.number } };
  });
}

function detailsOf(unit: UnitRow): UnitDetails {
  return {
    name: unit.name,
    purpose: unit.purpose,
    placeOfUse: unit.placeOfUse,
    supplyVolts: unit.supplyVolts,
    supplyHertz: unit.supplyHertz,
    protectionClass: unit.protectionClass,
    cordLengthM: unit.cordLengthM,
    cordAreaMm2: unit.cordAreaMm2,
    handheld: unit.handheld,
    altitudeM: unit.altitudeM,
  };
}
