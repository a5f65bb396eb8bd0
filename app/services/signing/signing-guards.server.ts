import { sheetGuards } from "~/services/bench/load-sheet.server";
import type { SheetLine } from "~/services/bench/sheet-view";
import { dayIn } from "~/services/context.server";
import type { SignedInPerson } from "~/context";
import { decide } from "~/workflow/permissions";
import type { Role } from "~/workflow/roles";
import { assessLicences, type LicenceAssessment } from "./assess-licences";
import type { Review } from "./load-review.server";
import type { GuardReason, ReviewGuard } from "./review-guards";

export interface GuardReport {
  guards: Record<ReviewGuard, GuardReason[]>;
  licence: LicenceAssessment["licence"];
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
  const licences = assessLicences(
    review.licences,
    { facts: sheet.revision.facts, hasBattery },
    dayIn(timeZone, at),
  );
  return {
    guards: {
      independent: decision.allowed ? [] : [{ text: decision.reason }],
      "licence-in-date": sentences(licences.inDate),
      "licence-in-scope": sentences(licences.inScope),
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
    licence: licences.licence,
    failed: sheet.lines.filter((line) => line.verdict === "fail"),
  };
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
