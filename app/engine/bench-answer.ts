import type { ComputedAnswer, Limit } from "./bench-check";
import { convertUnit } from "./scaled-units";
import {
  type Accuracy,
  combineVerdict,
  type Judgement,
  judgeReading,
  type MeasuredVerdict,
  type UncertaintyPolicy,
} from "./verdict";

/** One measuring range of an instrument with its maker's accuracy; `lower`, `upper` and `resolution` in `unit`. */
export interface InstrumentRange extends Accuracy {
  unit: string;
  lower: number;
  upper: number;
}

/** A reading as the display showed it; `bound` tells that it read over or under its range. */
export interface BenchReading {
  value: number;
  unit: string;
  bound: "over" | "under" | null;
}

/** What the bench said to one check. */
export type BenchAnswer =
  | { kind: "measured"; judgement: Judgement }
  | { kind: "examined"; conforms: boolean }
  | { kind: "not-applicable" }
  | { kind: "not-possible" };

export const lineVerdicts = ["pass", "fail", "undecided", "open", "not-applicable", "not-possible"] as const;
/** Where a line of the bench sheet stands. "open": the bench has not answered yet. */
export type LineVerdict = (typeof lineVerdicts)[number];

/** Verdicts that leave a required check undecided, so that the sheet can't be finished. */
export function isDecided(verdict: LineVerdict): boolean {
  return verdict !== "open" && verdict !== "undecided";
}

/**
 * The accuracy, in `unit`, of the finest range that holds the value; `null` where no range does: a value outside every
 * stated range has no known accuracy.
 */
export function accuracyAt(ranges: readonly InstrumentRange[], value: number, unit: string): Accuracy | null {
  let finest: { upper: number; accuracy: Accuracy } | null = null;
  for (const range of ranges) {
    const lower = convertUnit(range.lower, range.unit, unit);
    const upper = convertUnit(range.upper, range.unit, unit);
    const resolution = convertUnit(range.resolution, range.unit, unit);
    if (lower === null || upper === null || resolution === null) continue;
    const size = Math.abs(value);
    if (size < lower || size > upper) continue;
    if (finest === null || upper < finest.upper) {
      finest = { upper, accuracy: { percent: range.percent, digits: range.digits, resolution } };
    }
  }
  return finest?.accuracy ?? null;
}

/**
 * Judges a reading in its own unit against a limit in its own unit. `accuracy` is in the reading's unit. A reading
 * in a unit that doesn't measure what the limit limits decides nothing.
 */
export function judgeBenchReading(
  limit: Limit,
  reading: BenchReading,
  accuracy: Accuracy | null,
  policy: UncertaintyPolicy,
): Judgement {
  const value = convertUnit(reading.value, reading.unit, limit.unit);
  if (value === null) {
    return {
      verdict: "undecided",
      expandedUncertainty: null,
      guardBand: "none",
      reason: `A reading in ${reading.unit} can't be set against a limit in ${limit.unit}.`,
      neededAccuracy: `Take the reading in ${limit.unit}.`,
    };
  }
  const resolution = accuracy && convertUnit(accuracy.resolution, reading.unit, limit.unit);
  const bound = reading.bound === "over" ? ">" : reading.bound === "under" ? "<" : null;
  return judgeReading(
    limit,
    { value, bound },
    accuracy && resolution !== null ? { ...accuracy, resolution } : null,
    policy,
  );
}

/**
 * Where a line stands, from the engine's own answer and the bench's, with the reason in words. A computed fail stays
 * a fail whatever the bench says; "not applicable" and "not possible" take a step off the bench, not a fault off the map.
 */
export function lineVerdict(
  computed: ComputedAnswer["verdict"] | null,
  answer: BenchAnswer | null,
): { verdict: LineVerdict; because: string } {
  if (answer === null) return { verdict: "open", because: "Nobody has answered this on the bench yet." };
  if (answer.kind === "not-applicable" || answer.kind === "not-possible") {
    if (computed === "fail")
      return {
        verdict: "fail",
        because: "The map alone already fails this, whatever can be tried on the bench.",
      };
    if (computed === "unknown" && answer.kind === "not-applicable") {
      return {
        verdict: "undecided",
        because:
          "The map has this to decide and leaves something unknown, so it does apply: fill it in, or answer that the step is not possible with a reason.",
      };
    }
    return { verdict: answer.kind, because: "For the reason that the inspector gave." };
  }
  const { measured, bench } = benchSays(answer);
  const verdict = combineVerdict(computed, measured);
  if (computed === "fail" && measured !== "fail") {
    return { verdict, because: `${bench} But the map itself fails this.` };
  }
  if (computed === "unknown" && measured === "pass") {
    return {
      verdict,
      because: `${bench} But the map leaves something unknown, so this decides nothing yet: it must be filled in, or the step answered as not possible with a reason.`,
    };
  }
  return { verdict, because: bench };
}

function benchSays(answer: Extract<BenchAnswer, { kind: "measured" } | { kind: "examined" }>): {
  measured: MeasuredVerdict;
  bench: string;
} {
  if (answer.kind === "measured") {
    return { measured: answer.judgement.verdict, bench: answer.judgement.reason };
  }
  return answer.conforms
    ? { measured: "pass", bench: "It was examined and conforms." }
    : { measured: "fail", bench: "It was examined and does not conform." };
}

/**
 * Why a number can't be a reading in that unit; null when it can. Sizes are written without a sign: a negative value
 * would slip under every "at most". Only temperatures go below nought.
 */
export function readingObjection(value: number, unit: string): string | null {
  if (!Number.isFinite(value)) return "Write the reading as a number.";
  if (value < 0 && unit !== "°C") {
    return "Write the size without its sign; say the polarity under the conditions.";
  }
  return null;
}
