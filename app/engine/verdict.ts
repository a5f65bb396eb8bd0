import type { ComputedAnswer, Limit } from "./bench-check";
import { figure } from "./figure";

/** ± (percent of reading + digits of the last place), the last place being worth `resolution` in the reading's unit. */
export interface Accuracy {
  percent: number;
  digits: number;
  resolution: number;
}

/**
 * How the maker's accuracy becomes an expanded uncertainty U (k = 2).
 * "rect": the accuracy is the half-width of a rectangular distribution, u = a/√3, U = 2u (JCGM 100). "maker-k2": U = a.
 */
export type UncertaintyPolicy = "rect" | "maker-k2";

/** A reading off a display. `bound` is ">" or "<" where the display shows over- or under-range. */
export interface Reading {
  value: number;
  bound?: ">" | "<" | null;
}

export type MeasuredVerdict = "pass" | "fail" | "undecided";

export interface Judgement {
  verdict: MeasuredVerdict;
  /** Expanded uncertainty in the reading's unit; `null` where the instrument's accuracy is not known. */
  expandedUncertainty: number | null;
  /** What the reading had to keep clear of, in words. */
  guardBand: string;
  reason: string;
  /** What would decide it, when undecided; else `null`. */
  neededAccuracy: string | null;
}

/** Share taken off an over-range reading for a minimum limit: IEC 61557-2 allows an operating uncertainty of 30 %. */
const overRangeMargin = 0.3;

/** Expanded uncertainty U (k = 2) of a reading from the instrument's accuracy. */
export function expandedUncertainty(value: number, accuracy: Accuracy, policy: UncertaintyPolicy): number {
  const halfWidth = (accuracy.percent / 100) * Math.abs(value) + accuracy.digits * accuracy.resolution;
  return policy === "maker-k2" ? halfWidth : (2 * halfWidth) / Math.sqrt(3);
}

/**
 * Judges a reading against a limit with a guard band of U: pass only when the reading is clear of the limit by U on the
 * good side, fail only when it is clear by U on the bad side, else undecided. A reading that is no number decides nothing,
 * nor does nought under a maximum, unless the instrument is too coarse to show a good value otherwise.
 */
export function judgeReading(
  limit: Limit,
  reading: Reading,
  accuracy: Accuracy | null,
  policy: UncertaintyPolicy,
): Judgement {
  const { unit } = limit;
  if (!Number.isFinite(reading.value)) {
    return {
      verdict: "undecided",
      expandedUncertainty: null,
      guardBand: "none",
      reason: "There is no reading. A blank is never taken as nought.",
      neededAccuracy: "Take a reading.",
    };
  }
  if (reading.value < 0 && unit !== "°C") {
    return {
      verdict: "undecided",
      expandedUncertainty: null,
      guardBand: "none",
      reason: "A size has no sign: a negative reading would slip under every maximum.",
      neededAccuracy: "Take the size without its sign, and look why the instrument shows one.",
    };
  }
  if (reading.bound === ">" || reading.bound === "<")
    return judgeOutOfRange(limit, reading.value, reading.bound);
  if (accuracy === null || !isUsable(accuracy)) {
    return {
      verdict: "undecided",
      expandedUncertainty: null,
      guardBand: "not known",
      reason:
        "The instrument's accuracy in this range is not known, so the reading cannot be set against the limit.",
      neededAccuracy: `An instrument whose accuracy at ${figure(reading.value)} ${unit} is stated.`,
    };
  }
  const sides = sidesOf(limit);
  if (reading.value === 0 && !isPlausibleZero(limit, accuracy)) return zeroDecidesNothing(limit, accuracy);
  const uncertainty = expandedUncertainty(reading.value, accuracy, policy);
  const verdicts = sides.map(({ kind, value }) => judgeSide(kind, value, reading.value, uncertainty));
  const verdict: MeasuredVerdict = verdicts.includes("fail")
    ? "fail"
    : verdicts.every((each) => each === "pass")
      ? "pass"
      : "undecided";
  const distance = Math.min(...sides.map(({ value }) => Math.abs(reading.value - value)));
  const shown = `${figure(reading.value)} ± ${figure(uncertainty)} ${unit}`;
  return {
    verdict,
    expandedUncertainty: uncertainty,
    guardBand: sides
      .map(({ kind, value }) =>
        kind === "at-most"
          ? `pass up to ${figure(value - uncertainty)} ${unit}, fail from ${figure(value + uncertainty)} ${unit}`
          : `pass from ${figure(value + uncertainty)} ${unit}, fail up to ${figure(value - uncertainty)} ${unit}`,
      )
      .join("; "),
    reason:
      verdict === "pass"
        ? `${shown} is clear of the limit on the good side.${reading.value === 0 && limit.kind === "at-most" ? ` Nought is believable here: the last place of ${figure(accuracy.resolution)} ${unit} is too coarse to show less.` : ""}`
        : verdict === "fail"
          ? `${shown} is beyond the limit by more than the uncertainty.`
          : `${shown} straddles the limit: the instrument cannot decide it.`,
    neededAccuracy:
      verdict === "undecided"
        ? distance === 0
          ? "The reading lies on the limit: no accuracy decides it. Improve the unit or measure again."
          : `An expanded uncertainty of at most ${figure(distance)} ${unit} at this reading would decide it.`
        : null,
  };
}

/** An accuracy of nothing at all is no accuracy: no instrument is exact, and U would be nought. */
function isUsable({ percent, digits, resolution }: Accuracy): boolean {
  return (
    [percent, digits, resolution].every((each) => Number.isFinite(each) && each >= 0) &&
    (percent > 0 || digits * resolution > 0)
  );
}

/** A last place of at least this share of the limit makes a nought believable: smaller values are all shown as nought. */
const coarseShare = 0.01;

/**
 * Nought is what an instrument shows that is not connected. It counts only where it is the failing side anyway, or where the
 * last place is so coarse against the limit that a good value would be shown as nought. Own rule after "zero is not tested".
 */
function isPlausibleZero(limit: Limit, { resolution }: Accuracy): boolean {
  if (limit.kind === "at-least" || limit.unit === "°C") return true;
  const edge = limit.kind === "between" ? limit.upper : limit.value;
  return limit.kind === "at-most" && resolution >= Math.abs(edge) * coarseShare;
}

function zeroDecidesNothing(limit: Limit, { resolution }: Accuracy): Judgement {
  const last = `${figure(resolution)} ${limit.unit}`;
  return {
    verdict: "undecided",
    expandedUncertainty: null,
    guardBand: "none",
    reason: `Nought is what an instrument that is not connected shows, and this one would show ${last}: a reading of nought decides nothing.`,
    neededAccuracy: `Check the connections on something known and measure again. If it still shows nought, write it as below ${last}.`,
  };
}

function sidesOf(limit: Limit): { kind: "at-most" | "at-least"; value: number }[] {
  return limit.kind === "between"
    ? [
        { kind: "at-least", value: limit.lower },
        { kind: "at-most", value: limit.upper },
      ]
    : [{ kind: limit.kind, value: limit.value }];
}

function judgeSide(
  kind: "at-most" | "at-least",
  limit: number,
  value: number,
  uncertainty: number,
): MeasuredVerdict {
  const margin = kind === "at-most" ? limit - value : value - limit;
  if (margin >= uncertainty) return "pass";
  return margin <= -uncertainty ? "fail" : "undecided";
}

/** Over- and under-range displays: a `>` passes a minimum only with 30 % in hand; a `>` at or above a maximum fails it. */
function judgeOutOfRange(limit: Limit, value: number, bound: ">" | "<"): Judgement {
  const verdicts = sidesOf(limit).map(({ kind, value: edge }): MeasuredVerdict => {
    if (bound === ">") {
      if (kind === "at-least") return value * (1 - overRangeMargin) >= edge ? "pass" : "undecided";
      return "fail";
    }
    // "Below nought" names no value: the display's last place has to be told.
    if (kind === "at-most") return value > 0 && value * (1 + overRangeMargin) <= edge ? "pass" : "undecided";
    return value <= edge ? "fail" : "undecided";
  });
  const verdict: MeasuredVerdict = verdicts.includes("fail")
    ? "fail"
    : verdicts.every((each) => each === "pass")
      ? "pass"
      : "undecided";
  const shown = `${bound} ${figure(value)} ${limit.unit}`;
  return {
    verdict,
    expandedUncertainty: null,
    guardBand: `${overRangeMargin * 100} % of the displayed bound`,
    reason:
      verdict === "pass"
        ? `${shown} keeps clear of the limit even with 30 % off.`
        : verdict === "fail"
          ? `${shown} is out of range on the wrong side of the limit.`
          : `${shown} does not say on which side of the limit the value lies.`,
    neededAccuracy: verdict === "undecided" ? "A range that shows the value itself." : null,
  };
}

/**
 * The verdict of a check from the engine's own answer and the bench's: fail if either fails; pass only if every part that
 * the check has is a pass; else undecided. `measured` is `null` while the bench has not answered.
 */
export function combineVerdict(
  computed: ComputedAnswer["verdict"] | null,
  measured: MeasuredVerdict | null,
): MeasuredVerdict {
  if (computed === "fail" || measured === "fail") return "fail";
  return (computed === null || computed === "pass") && measured === "pass" ? "pass" : "undecided";
}
