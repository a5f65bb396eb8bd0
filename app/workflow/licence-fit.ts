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

export type LicenceFit<T extends LicenceTerms> =
  | { kind: "fits"; licence: T }
  /** No licence counts on that day. */
  | { kind: "not-in-date"; reason: string }
  /** One counts on that day, but doesn't reach as far as the unit. */
  | { kind: "not-in-scope"; reason: string };

/** Whether a licence counts on a day (YYYY-MM-DD in the workshop's time zone). */
export function licenceInDate(licence: LicenceTerms, day: string): boolean {
  return !licence.revoked && licence.validFrom <= day && day <= licence.validTo;
}

/** Finds, among a person's licences, the one that covers a unit on a day, or says in words why none does. */
export function fitLicence<T extends LicenceTerms>(
  licences: readonly T[],
  need: LicenceNeed,
  day: string,
): LicenceFit<T> {
  const counting = licences.filter((licence) => licenceInDate(licence, day));
  if (counting.length === 0) return { kind: "not-in-date", reason: whyNoneCounts(licences, day) };
  const fitting = counting.find((licence) => objectionsOf(licence, need).length === 0);
  if (fitting) return { kind: "fits", licence: fitting };
  const reason = counting
    .map((licence) => `${name(licence)} ${objectionsOf(licence, need).join(" and ")}.`)
    .join(" ");
  return { kind: "not-in-scope", reason };
}

function objectionsOf(licence: LicenceTerms, need: LicenceNeed): string[] {
  return [
    // Written so that a voltage that is no number fits nothing.
    !(need.supplyVolts <= licence.maxSupplyVolts)
      ? `covers supplies up to ${licence.maxSupplyVolts} V, and this unit takes ${need.supplyVolts} V`
      : null,
    need.hasBattery && !licence.coversBatteries ? "doesn’t cover equipment with batteries" : null,
  ].filter((objection) => objection !== null);
}

function whyNoneCounts(licences: readonly LicenceTerms[], day: string): string {
  if (licences.length === 0) return "No licence is recorded for you in this workshop.";
  const latest = licences.reduce((a, b) => (b.validTo > a.validTo ? b : a));
  if (latest.revoked) return `${name(latest)} was revoked.`;
  return day < latest.validFrom
    ? `${name(latest)} counts from ${latest.validFrom} on.`
    : `${name(latest)} lapsed after ${latest.validTo}.`;
}

function name(licence: LicenceTerms): string {
  return `Licence ${licence.number} (${licence.authority})`;
}
