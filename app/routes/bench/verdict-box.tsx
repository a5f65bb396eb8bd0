import { uncertaintyText } from "~/components/bench-reading";
import { LineVerdictBadge } from "~/components/bench-verdict";
import type { LineVerdict } from "~/engine/bench-answer";
import type { Judgement } from "~/engine/verdict";

/** A verdict, large, with what it rests on: the reading's uncertainty, the guard band, what would decide it. */
export function VerdictBox({
  verdict,
  because,
  judged,
  unit,
}: {
  verdict: LineVerdict;
  because: string;
  judged: Judgement | null;
  unit: string;
}) {
  return (
    <div className="space-y-2">
      <LineVerdictBadge verdict={verdict} size="bench" />
      <p>{because}</p>
      {judged ? (
        <dl className="grid gap-x-4 gap-y-1 text-sm sm:grid-cols-[auto_1fr]">
          <dt className="legend-text pt-0.5">Uncertainty</dt>
          <dd className="tabular-nums">{uncertaintyText(judged.expandedUncertainty, unit)}</dd>
          <dt className="legend-text pt-0.5">Guard band</dt>
          <dd className="tabular-nums">{judged.guardBand}</dd>
          {judged.neededAccuracy ? (
            <>
              <dt className="legend-text pt-0.5">To decide it</dt>
              <dd className="font-medium">{judged.neededAccuracy}</dd>
            </>
          ) : null}
        </dl>
      ) : null}
    </div>
  );
}
