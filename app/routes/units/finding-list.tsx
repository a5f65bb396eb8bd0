import { PhotoStrip, type StripFile } from "~/components/photo-strip";
import { Badge } from "~/components/ui/badge";
import { SeverityBadge } from "~/components/ui/severity-badge";
import { Time } from "~/components/ui/time";

export interface FindingItem {
  id: number;
  number: number;
  severity: "danger" | "defect" | "advice";
  elementId: string | null;
  text: string;
  revision: number;
  raisedBy: string;
  raisedAt: Date;
  photos: (StripFile & { subject: string })[];
  answers: { id: number; revision: number; text: string; answeredBy: string; answeredAt: Date }[];
  closing: { text: string; by: string; at: Date } | null;
}

/** Findings with what was answered and how they were closed, for reading. */
export function FindingList({
  findings,
  api,
  unit,
}: {
  findings: readonly FindingItem[];
  api: string;
  unit: number;
}) {
  return (
    <ol className="divide-y divide-rule">
      {findings.map((finding) => (
        <li key={finding.id} id={`finding-${finding.number}`} className="space-y-3 px-4 py-4">
          <FindingHead finding={finding} />
          <PhotoStrip
            files={finding.photos.filter((photo) => photo.subject === "finding")}
            api={api}
            unit={unit}
            alt={`Finding ${finding.number}`}
          />
          <FindingHistory finding={finding} api={api} unit={unit} />
        </li>
      ))}
    </ol>
  );
}

export function FindingHead({ finding }: { finding: FindingItem }) {
  return (
    <div className="space-y-1">
      <div className="flex flex-wrap items-center gap-2">
        <SeverityBadge severity={finding.severity} />
        <h3 className="font-semibold">Finding {finding.number}</h3>
        {finding.elementId ? <span className="font-mono text-sm">{finding.elementId}</span> : null}
        <Badge tone={finding.closing ? "pass" : "outline"}>{finding.closing ? "Closed" : "Open"}</Badge>
      </div>
      <p className="whitespace-pre-wrap">{finding.text}</p>
      <p className="text-sm text-ink-soft">
        Raised by {finding.raisedBy} on revision {finding.revision}, <Time at={finding.raisedAt} />
      </p>
    </div>
  );
}

/** Earlier answers with their photos, and the closing. */
export function FindingHistory({
  finding,
  api,
  unit,
  before,
}: {
  finding: FindingItem;
  api: string;
  unit: number;
  /** Only the answers given before this revision. */
  before?: number;
}) {
  const answers = finding.answers.filter((answer) => before === undefined || answer.revision < before);
  return (
    <>
      {answers.map((answer) => (
        <div key={answer.id} className="space-y-2 border-l-2 border-rule-strong pl-3">
          <p className="whitespace-pre-wrap">{answer.text}</p>
          <p className="text-sm text-ink-soft">
            Answered by {answer.answeredBy} for revision {answer.revision}, <Time at={answer.answeredAt} />
          </p>
          <PhotoStrip
            files={finding.photos.filter(
              (photo) => photo.subject === "answer" && photo.revision === answer.revision,
            )}
            api={api}
            unit={unit}
            alt={`Answer to finding ${finding.number}`}
          />
        </div>
      ))}
      {finding.closing ? (
        <div className="border-l-2 border-pass pl-3">
          <p className="whitespace-pre-wrap">{finding.closing.text}</p>
          <p className="text-sm text-ink-soft">
            Closed by {finding.closing.by}, <Time at={finding.closing.at} />
          </p>
        </div>
      ) : null}
    </>
  );
}
