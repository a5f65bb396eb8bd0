import { PhotoStrip } from "~/components/photo-strip";
import { PhotoUpload } from "~/components/photo-upload";
import { Sheet } from "~/components/ui/sheet";
import type { BenchCheck } from "~/engine/bench-check";
import type { FindingView } from "~/services/bench/sheet-view";
import { CloseFinding } from "./close-finding-form";
import { FindingSummary } from "./finding-summary";
import { RaiseFinding } from "./raise-finding-form";

interface CheckFindingsProps {
  check: BenchCheck;
  findings: readonly FindingView[];
  elements: readonly { id: string; label: string }[];
  mayWork: boolean;
  /** `/api/w/<workshop>` */
  api: string;
  /** The address of the unit on the bench. */
  base: string;
  unit: number;
  draftKey: string;
}

/** The findings of this check: each with its photos and its closing, and a form to raise another. */
export function CheckFindings({
  check,
  findings,
  elements,
  mayWork,
  api,
  base,
  unit,
  draftKey,
}: CheckFindingsProps) {
  return (
    <Sheet title="Findings" lead={findings.length === 0 ? "None on this check so far." : undefined}>
      <div className="space-y-6">
        {findings.map((finding) => (
          <div key={finding.id} className="space-y-3 border-b border-rule pb-5">
            <FindingSummary finding={finding} lines={[{ check }]} checkBase={base} />
            <PhotoStrip
              files={finding.photos}
              api={api}
              unit={unit}
              alt={`Photo of finding ${finding.number}`}
            />
            {mayWork && !finding.closing ? (
              <>
                <PhotoUpload
                  action={`${api}/units/${unit}/files`}
                  fields={{ subject: "finding", findingId: String(finding.id) }}
                  label="Add photos of it"
                />
                <CloseFinding finding={finding} draftKey={draftKey} base={base} />
              </>
            ) : null}
          </div>
        ))}
        {mayWork ? <RaiseFinding check={check} elements={elements} draftKey={draftKey} base={base} /> : null}
      </div>
    </Sheet>
  );
}
