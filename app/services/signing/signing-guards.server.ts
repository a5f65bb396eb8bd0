import { sheetGuards } from "~/services/bench/load-sheet.server";
import type { SheetLine } from "~/services/bench/sheet-view";
import { dayIn } from "~/services/context.server";
import type { SignedInPerson } from "~/context";
import type { LicenceView } from "~/services/people/licences.server";
import { decide } from "~/workflow/permissions";
import { fitLicence, type LicenceFit } from "~/workflow/licence-fit";
import type { Role } from "~/workflow/roles";
import type { Review } from "./load-review.server";
import type { GuardReason, ReviewGuard } from "./review-guards";

export interface GuardReport {
  guards: Record<ReviewGuard, GuardReason[]>;
  /** The licence that a decision would rest on; null when none is both in date and in scope. */
  licence: LicenceView | null;
  /** Checks that fail: a signature in spite of them needs the signer's reasons. */
  failed: SheetLine[];
}

/** Weighs a review for one person at one moment. Met guards have no reasons. */
export function reportGuards(
  review: Review,
  signer: { person: SignedInPerson; roles: readonly Role[] },
  timeZone: string,
  at: Date,
): GuardReport {
  const { sheet, unit, findings } = review;
  const decision = decide("signing.sign", { id: signer.person.id, roles: signer.roles }, unit);
  const hasBattery = sheet.revision.map.elements.some((element) => element.kind === "battery");
  const { supplyVolts } = sheet.revision.facts;
  const fit = fitLicence(review.licences, { supplyVolts, hasBattery }, dayIn(timeZone, at));
  return {
    guards: {
      independent: decision.allowed ? [] : [{ text: decision.reason }],
      "licence-in-date": sentences(fit.kind === "not-in-date" ? fit.reasons : []),
      "licence-in-scope": sentences(scopeReasons(fit)),
      "checks-decided": sheetReasons(sheet.lines, "checks-decided"),
      "photos-present": sheetReasons(sheet.lines, "photos-present"),
      "no-open-danger": findings
        .filter((finding) => finding.severity === "danger" && finding.closing === null)
        .map((finding) => ({
          text: `Finding ${finding.number} tells of a danger and is open: “${finding.text}”`,
          findingNumber: finding.number,
        })),
      "instruments-in-calibration": calibrationReasons(sheet.lines, timeZone),
    },
    licence: fit.kind === "fits" ? fit.licence : null,
    failed: sheet.lines.filter((line) => line.verdict === "fail"),
  };
}

function scopeReasons(fit: LicenceFit<LicenceView>): string[] {
  switch (fit.kind) {
    case "fits":
      return [];
    case "not-in-scope":
      return fit.reasons;
    case "not-in-date":
      return ["Without a licence in date there is no scope to compare with."];
  }
}

function sentences(texts: readonly string[]): GuardReason[] {
  return texts.map((text) => ({ text }));
}

/** The sheet's own guards, asked line by line so that each reason knows its check. */
function sheetReasons(
  lines: readonly SheetLine[],
  guard: "checks-decided" | "photos-present",
): GuardReason[] {
  if (lines.length === 0) return sentences(sheetGuards({ lines: [] })[guard]);
  return lines.flatMap((line) =>
    sheetGuards({ lines: [line] })[guard].map((text) => ({ text, checkKey: line.check.key })),
  );
}

/** Every reading that counts must come from an instrument that was in calibration on the day of the reading. */
function calibrationReasons(lines: readonly SheetLine[], timeZone: string): GuardReason[] {
  return lines.flatMap(({ check, observation }) => {
    if (observation?.kind !== "measured") return [];
    const { instrument } = observation;
    if (instrument === null) {
      return [{ text: `${check.title}: the instrument of the reading is not known.`, checkKey: check.key }];
    }
    const day = dayIn(timeZone, observation.at);
    if (day <= instrument.calibrationDue) return [];
    return [
      {
        text: `${check.title}: measured on ${day} with ${instrument.name} (${instrument.serial}), whose calibration ended on ${instrument.calibrationDue}.`,
        checkKey: check.key,
      },
    ];
  });
}
