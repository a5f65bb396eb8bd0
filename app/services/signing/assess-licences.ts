import type { UnitFacts } from "~/engine/unit-facts";

export interface LicenceRow {
  id: number;
  number: string;
  authority: string;
  /** First and last day, in the workshop's calendar. */
  validFrom: string;
  validTo: string;
  maxSupplyVolts: number;
  coversBatteries: boolean;
  revokedAt: Date | null;
}

export interface LicenceAssessment {
  /** The licence that a signature would rest on; null when none is both in date and in scope. */
  licence: LicenceRow | null;
  /** What stands against each guard, as sentences; none where it is met. */
  inDate: string[];
  inScope: string[];
}

/**
 * Looks for a licence that is in date on `today` and whose scope covers the unit. A licence is valid on its last day.
 *
 * @param today YYYY-MM-DD in the workshop's time zone
 */
export function assessLicences(
  licences: readonly LicenceRow[],
  unit: { facts: Pick<UnitFacts, "supplyVolts">; hasBattery: boolean },
  today: string,
): LicenceAssessment {
  const current = licences.filter((licence) => objectionToDate(licence, today) === null);
  if (current.length === 0) {
    const inDate =
      licences.length === 0
        ? ["You have no licence on file in this workshop. A steward enters it after seeing it."]
        : licences.flatMap((licence) => objectionToDate(licence, today) ?? []);
    return {
      licence: null,
      inDate,
      inScope: ["Without a licence in date there is no scope to compare with."],
    };
  }
  const fitting = current.find((licence) => objectionsToScope(licence, unit).length === 0);
  return fitting
    ? { licence: fitting, inDate: [], inScope: [] }
    : { licence: null, inDate: [], inScope: current.flatMap((licence) => objectionsToScope(licence, unit)) };
}

function objectionToDate(licence: LicenceRow, today: string): string | null {
  const name = nameOf(licence);
  if (licence.revokedAt !== null) return `${name} has been revoked.`;
  if (today < licence.validFrom) return `${name} begins only on ${licence.validFrom}.`;
  if (today > licence.validTo) return `${name} lapsed: its last day was ${licence.validTo}.`;
  return null;
}

function objectionsToScope(
  licence: LicenceRow,
  { facts, hasBattery }: { facts: Pick<UnitFacts, "supplyVolts">; hasBattery: boolean },
): string[] {
  const name = nameOf(licence);
  const objections: string[] = [];
  if (facts.supplyVolts > licence.maxSupplyVolts) {
    objections.push(
      `${name} covers supplies up to ${licence.maxSupplyVolts} V; this unit is for ${facts.supplyVolts} V.`,
    );
  }
  if (hasBattery && !licence.coversBatteries) {
    objections.push(`${name} does not cover battery equipment; this unit has a battery.`);
  }
  return objections;
}

function nameOf({ number, authority }: LicenceRow): string {
  return `Licence ${number} (${authority})`;
}
