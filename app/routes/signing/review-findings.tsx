import { PhotoStrip } from "~/components/photo-strip";
import { Sheet } from "~/components/ui/sheet";
import { FindingSummary } from "~/routes/bench/finding-summary";
import type { FindingView } from "~/services/bench/sheet-view";

/** Every finding with answers, photos and closing; open ones first. */
export function ReviewFindings({
  findings,
  lines,
  benchBase,
  api,
  unit,
}: {
  findings: readonly FindingView[];
  lines: readonly { check: { key: string; title: string } }[];
  benchBase: string;
  api: string;
  unit: number;
}) {
  const open = findings.filter((finding) => finding.closing === null);
  const closed = findings.filter((finding) => finding.closing !== null);
  return (
    <Sheet
      id="findings"
      title="Findings"
      lead={findings.length === 0 ? undefined : `${open.length} open, ${closed.length} closed.`}
    >
      {findings.length === 0 ? (
        <p className="text-ink-soft">No finding was raised.</p>
      ) : (
        <ul className="divide-y divide-rule">
          {[...open, ...closed].map((finding) => (
            <li
              key={finding.id}
              id={`finding-${finding.number}`}
              className="scroll-mt-4 space-y-3 py-4 first:pt-0 last:pb-0"
            >
              <FindingSummary finding={finding} lines={lines} checkBase={benchBase} />
              {finding.photos.length > 0 ? (
                <PhotoStrip files={finding.photos} api={api} unit={unit} alt={`Finding ${finding.number}`} />
              ) : null}
            </li>
          ))}
        </ul>
      )}
    </Sheet>
  );
}
