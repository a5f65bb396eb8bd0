import { dayText } from "./day-text";

/** What a licence allows and when. Dates are ISO days; both ends belong to it. */
export interface LicenceTerms {
  number: string;
  authority: string;
  validFrom: string;
  validTo: string;
  maxSupplyVolts: number;
  coversBatteries: boolean;
  revoked: boolean;
}

/** What a unit asks of a licence. */
export interface LicenceNeed {
  supplyVolts: number;
  hasBattery: boolean;
}

/** `reasons` are sentences for the person whose licences were looked at. */
export type LicenceFit<T extends LicenceTerms> =
  | { kind: "fits"; licence: T }
  /** No licence counts on that day. */
  | { kind: "not-in-date"; reasons: string[] }
  /** One counts on that day, but doesn't reach as far as the unit. */
  | { kind: "not-in-scope"; reasons: string[] };

/** Whether a licence counts on a day (YYYY-MM-DD in the workshop's time zone). */
export function licenceInDate(licence: LicenceTerms, day: string): boolean {
  return objectionsToDate(licence, day).length === 0;
}

/** Finds, among a person's licences, the one that covers a unit on a day, or says in words why none does. */
export function fitLicence<T extends LicenceTerms>(
  licences: readonly T[],
  need: LicenceNeed,
  day: string,
): LicenceFit<T> {
  if (licences.length === 0) {
    return {
      kind: "not-in-date",
      reasons: ["You have no licence on file in this workshop. A steward enters it after seeing it."],
    };
  }
  const counting = licences.filter((licence) => licenceInDate(licence, day));
  if (counting.length === 0) {
    return { kind: "not-in-date", reasons: licences.flatMap((licence) => objectionsToDate(licence, day)) };
  }
  const fitting = counting.find((licence) => objectionsToScope(licence, need).length === 0);
  if (fitting) return { kind: "fits", licence: fitting };
  return { kind: "not-in-scope", reasons: counting.flatMap((licence) => objectionsToScope(licence, need)) };
}

function objectionsToDate(licence: LicenceTerms, day: string): string[] {
  if (licence.revoked) return [`${name(licence)} has been revoked.`];
  if (day < licence.validFrom) return [`${name(licence)} begins only on ${dayText(licence.validFrom)}.`];
  if (day > licence.validTo)
    return [`${name(licence)} lapsed: its last day was ${dayText(licence.validTo)}.`];
  return [];
}

function objectionsToScope(licence: LicenceTerms, need: LicenceNeed): string[] {
  return [
    // Written so that a voltage that is no number fits nothing.
    !(need.supplyVolts <= licence.maxSupplyVolts)
      ? `${name(licence)} covers supplies up to ${licence.maxSupplyVolts} V; this unit is for ${need.supplyVolts} V.`
      : null,
    need.hasBattery && !licence.coversBatteries
      ? `${name(licence)} does not cover battery equipment; this unit has a battery.`
      : null,
  ].filter((objection) => objection !== null);
}

function name(licence: LicenceTerms): string {
  return `Licence ${licence.number} (${licence.authority})`;
}
