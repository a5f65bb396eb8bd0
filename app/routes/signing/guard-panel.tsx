import { Link } from "react-router";
import { CircleCheck, OctagonAlert } from "lucide-react";
import { Sheet } from "~/components/ui/sheet";
import { Day } from "~/components/ui/time";
import { checkHref } from "~/routes/bench/check-href";
import type { GuardReason, ReviewGuard } from "~/services/signing/review-guards";

const titles: Record<ReviewGuard, string> = {
  independent: "You neither built nor inspected it",
  "licence-in-date": "Your licence is in date today",
  "licence-in-scope": "Your licence covers this unit",
  "checks-decided": "Every check is decided",
  "photos-present": "Every required photo is there",
  "no-open-danger": "No finding of danger is open",
  "instruments-in-calibration": "Every instrument was in calibration on the day of its reading",
};

/** Each guard of a signature, told as met or with what stops it and where that can be seen. */
export function GuardPanel({
  guards,
  licence,
  benchBase,
}: {
  guards: readonly { guard: ReviewGuard; reasons: GuardReason[] }[];
  /** The one that a decision would rest on. */
  licence: { holder: string; number: string; authority: string; validTo: string } | null;
  /** The address of the unit on the bench. */
  benchBase: string;
}) {
  const stopping = guards.filter(({ reasons }) => reasons.length > 0).length;
  return (
    <Sheet
      id="guards"
      title="Before a signature"
      lead={
        stopping === 0
          ? "Everything that can be told beforehand is met. It is looked at again in the moment of signing."
          : `${stopping} of ${guards.length} ${stopping === 1 ? "stands" : "stand"} in the way of a signature.`
      }
    >
      <ul className="divide-y divide-rule">
        {guards.map(({ guard, reasons }) => (
          <li key={guard} data-guard={guard} className="flex items-start gap-3 py-2 first:pt-0 last:pb-0">
            {reasons.length === 0 ? (
              <CircleCheck aria-hidden size={20} className="mt-0.5 shrink-0 text-pass" />
            ) : (
              <OctagonAlert aria-hidden size={20} className="mt-0.5 shrink-0 text-fail" />
            )}
            <div className="min-w-0">
              <p className="font-medium">
                {titles[guard]}
                <span className={`ml-2 text-sm ${reasons.length === 0 ? "text-pass" : "text-fail"}`}>
                  {reasons.length === 0 ? "met" : "not met"}
                </span>
              </p>
              {guard === "licence-in-date" && licence ? (
                <p className="text-sm text-ink-soft">
                  {licence.number}, {licence.authority}, of {licence.holder}, until{" "}
                  <Day on={licence.validTo} />
                </p>
              ) : null}
              {reasons.length > 0 ? (
                <ul className="mt-1 space-y-1 text-sm">
                  {reasons.map((reason) => (
                    <li key={reason.text}>
                      {reason.text} <ReasonLink reason={reason} benchBase={benchBase} />
                    </li>
                  ))}
                </ul>
              ) : null}
            </div>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}

function ReasonLink({ reason, benchBase }: { reason: GuardReason; benchBase: string }) {
  if (reason.checkKey !== undefined) {
    return (
      <Link to={checkHref(benchBase, reason.checkKey)} className="text-link whitespace-nowrap">
        Show the check
      </Link>
    );
  }
  if (reason.findingNumber !== undefined) {
    return (
      <a href={`#finding-${reason.findingNumber}`} className="text-link whitespace-nowrap">
        Show the finding
      </a>
    );
  }
  return null;
}
