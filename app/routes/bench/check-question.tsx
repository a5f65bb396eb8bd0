import { CitationText, limitText } from "~/components/bench-limit";
import { Caution } from "~/components/ui/caution";
import { Sheet } from "~/components/ui/sheet";
import { VerdictBadge } from "~/components/ui/verdict-badge";
import type { BenchCheck, Reason } from "~/engine/bench-check";
import type { Citation } from "~/engine/rule-set";

/** What the step is about: cautions first, then how it is done and its limit with the source. */
export function CheckQuestion({ check }: { check: BenchCheck }) {
  const { asks } = check;
  const limitSource = asks.kind === "reading" ? placeOf(asks.limit.citation) : null;
  const sources = check.citations.filter((citation) => placeOf(citation) !== limitSource);
  return (
    <div className="space-y-5">
      {check.cautions.length > 0 ? (
        <Caution sign="voltage" title="Before this step" items={check.cautions} size="bench" />
      ) : null}
      <Sheet title="How">
        <ol className="list-decimal space-y-1.5 pl-6 text-lg">
          {check.method.map((step) => (
            <li key={step}>{step}</li>
          ))}
        </ol>
        {asks.kind === "reading" && asks.conditions.length > 0 ? (
          <>
            <h3 className="legend-text mt-4">Under these conditions</h3>
            <ul className="list-disc pl-6">
              {asks.conditions.map((condition) => (
                <li key={condition}>{condition}</li>
              ))}
            </ul>
          </>
        ) : null}
      </Sheet>
      <Sheet title={asks.kind === "reading" ? "Limit" : "What is asked"}>
        {asks.kind === "reading" ? (
          <>
            <p className="text-2xl font-semibold tabular-nums">
              {asks.quantity}: {limitText(asks.limit)}
            </p>
            <p className="mt-1 text-sm">
              <CitationText citation={asks.limit.citation} />
            </p>
            <p className="mt-2 text-sm text-ink-soft">
              Instrument: {asks.instrument.kind.replaceAll("-", " ")}, {asks.instrument.range}
            </p>
          </>
        ) : (
          <p className="text-lg">{asks.question}</p>
        )}
        {sources.length > 0 ? (
          <>
            <h3 className="legend-text mt-4">Sources</h3>
            <ul className="space-y-1 text-sm">
              {sources.map((citation) => (
                <li key={placeOf(citation)}>
                  <CitationText citation={citation} />
                </li>
              ))}
            </ul>
          </>
        ) : null}
      </Sheet>
    </div>
  );
}

/** Why the step is on the sheet, and what the engine already knows about it from the map. */
export function CheckBackground({
  check,
  elements,
}: {
  check: BenchCheck;
  elements: readonly { id: string; label: string }[];
}) {
  return (
    <div className="space-y-5">
      <Sheet title="Why this step is here">
        <Reasons reasons={check.why} elements={elements} />
      </Sheet>
      {check.computed ? (
        <Sheet
          title="What the map says by itself"
          lead="Computed, not measured."
          actions={<VerdictBadge verdict={check.computed.verdict} />}
        >
          <Reasons reasons={check.computed.reasons} elements={elements} />
        </Sheet>
      ) : null}
    </div>
  );
}

function placeOf({ standard, clause, edition }: Citation): string {
  return `${standard} ${clause} ${edition}`;
}

function Reasons({
  reasons,
  elements,
}: {
  reasons: readonly Reason[];
  elements: readonly { id: string; label: string }[];
}) {
  if (reasons.length === 0) return <p className="text-ink-soft">No particular reason was given.</p>;
  return (
    <ul className="space-y-2">
      {reasons.map((reason) => (
        <li key={reason.text}>
          {reason.text}
          {reason.elements.length > 0 ? (
            <span className="block text-sm text-ink-soft">
              {reason.elements
                .map((id) => elements.find((element) => element.id === id))
                .flatMap((element) => (element ? [`${element.id} (${element.label})`] : []))
                .join(", ")}
            </span>
          ) : null}
        </li>
      ))}
    </ul>
  );
}
