import { readingText } from "~/components/bench-reading";
import { Day, Time } from "~/components/ui/time";
import { figure } from "~/engine/figure";
import type { ObservationView } from "~/services/bench/sheet-view";

/** The answer that counts and, below it, every earlier one: nothing is overwritten. */
export function AnswerHistory({ history }: { history: readonly ObservationView[] }) {
  const [latest, ...earlier] = history;
  if (!latest) return null;
  return (
    <>
      <AnswerFacts observation={latest} />
      {earlier.length > 0 ? (
        <details className="border-t border-rule pt-2">
          <summary className="min-h-11 py-2 font-medium">
            {earlier.length === 1 ? "1 earlier answer" : `${earlier.length} earlier answers`}
          </summary>
          <ol className="divide-y divide-rule">
            {earlier.map((observation) => (
              <li key={observation.id} className="py-3 text-ink-soft">
                <AnswerFacts observation={observation} />
              </li>
            ))}
          </ol>
        </details>
      ) : null}
    </>
  );
}

function AnswerFacts({ observation }: { observation: ObservationView }) {
  const { instrument, accuracy, carried } = observation;
  return (
    <dl className="grid gap-x-4 gap-y-1 sm:grid-cols-[auto_1fr] [&_dt]:pt-0.5">
      <dt className="legend-text">Answer</dt>
      <dd className="text-lg font-semibold tabular-nums">{readingText(observation)}</dd>
      {instrument ? (
        <>
          <dt className="legend-text">Instrument</dt>
          <dd>
            {instrument.name}, serial {instrument.serial}
            <span className="block text-sm text-ink-soft">
              {accuracy
                ? `± (${figure(accuracy.percent)} % + ${figure(accuracy.digits)} digits of ${figure(accuracy.resolution)} ${observation.unit ?? ""})`
                : "outside every stated range: accuracy not known"}
              , calibrated until <Day on={instrument.calibrationDue} />
            </span>
          </dd>
        </>
      ) : null}
      {observation.conditions ? (
        <>
          <dt className="legend-text">Conditions</dt>
          <dd className="whitespace-pre-line">{observation.conditions}</dd>
        </>
      ) : null}
      {observation.reason ? (
        <>
          <dt className="legend-text">
            {observation.correctsId === null ? "Reason" : "Reason of the correction"}
          </dt>
          <dd className="whitespace-pre-line">{observation.reason}</dd>
        </>
      ) : null}
      {observation.note ? (
        <>
          <dt className="legend-text">Note</dt>
          <dd className="whitespace-pre-line">{observation.note}</dd>
        </>
      ) : null}
      <dt className="legend-text">By</dt>
      <dd>
        {observation.by}, <Time at={observation.at} />
        {carried ? (
          <span className="block text-sm text-ink-soft">
            on revision {observation.revision}; carried over by {carried.by}, <Time at={carried.at} />
          </span>
        ) : null}
      </dd>
    </dl>
  );
}
