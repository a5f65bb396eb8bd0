import { Link } from "react-router";
import { SeverityBadge } from "~/components/ui/severity-badge";
import { checkHref } from "./check-href";
import type { FindingView } from "~/services/bench/sheet-view";

/** One finding in a few lines: how bad, what, on what, and how it stands. */
export function FindingSummary({
  finding,
  lines,
  checkBase,
}: {
  finding: FindingView;
  lines: readonly { check: { key: string; title: string } }[];
  /** The address of the unit on the bench. */
  checkBase: string;
}) {
  const check = lines.find((line) => line.check.key === finding.checkKey)?.check;
  return (
    <div className="min-w-0 space-y-1 text-sm wrap-anywhere">
      <p className="flex flex-wrap items-center gap-2">
        <SeverityBadge severity={finding.severity} />
        <span className="font-semibold">Finding {finding.number}</span>
        <span className={finding.closing ? "text-ink-soft" : "font-semibold text-undecided"}>
          {finding.closing ? "closed" : "open"}
        </span>
      </p>
      <p className="whitespace-pre-line">{finding.text}</p>
      <p className="text-ink-soft">
        {check ? (
          <Link to={checkHref(checkBase, check.key)} className="text-link">
            {check.title}
          </Link>
        ) : (
          whereElse(finding)
        )}
        {`, revision ${finding.revision}, ${finding.raisedBy}`}
      </p>
      {finding.answers.map((answer) => (
        <p key={answer.id} className="border-l-2 border-rule-strong pl-2 whitespace-pre-line">
          <span className="font-medium">{answer.answeredBy} answered: </span>
          {answer.text}
        </p>
      ))}
      {finding.closing ? (
        <p className="border-l-2 border-pass pl-2 whitespace-pre-line">
          <span className="font-medium">{finding.closing.by} closed it: </span>
          {finding.closing.text}
        </p>
      ) : null}
    </div>
  );
}

function whereElse({ checkKey, elementId }: Pick<FindingView, "checkKey" | "elementId">): string {
  if (elementId !== null) return `on ${elementId}`;
  return checkKey === null ? "on the unit as a whole" : "on a check that this revision no longer calls for";
}
