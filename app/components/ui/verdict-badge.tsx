/**
 * A verdict as shape and word. `null` and `undefined` show "Unknown": the absence of a verdict is never a pass.
 *   <VerdictBadge verdict={check.verdict} />   <VerdictBadge verdict="undecided" size="bench" />
 */
import { badgeTones, type BadgeTone } from "./badge";
import { VerdictIcon, type Verdict } from "./verdict-icon";

export type { Verdict };

const words: Record<Verdict, { word: string; tone: BadgeTone }> = {
  pass: { word: "Pass", tone: "pass" },
  fail: { word: "Fail", tone: "fail" },
  undecided: { word: "Undecided", tone: "undecided" },
  unknown: { word: "Unknown", tone: "unknown" },
  "not-applicable": { word: "Not applicable", tone: "idle" },
  "not-possible": { word: "Not possible", tone: "idle" },
};

/** The word for a verdict, for titles, e-mails and exports. */
export function verdictWord(verdict: Verdict): string {
  return words[verdict].word;
}

export function VerdictBadge({
  verdict,
  size = "md",
  label,
  className = "",
}: {
  verdict: Verdict | null | undefined;
  size?: "md" | "bench";
  /** Other words than the usual one, such as "Not measured yet" for an unknown. */
  label?: string;
  className?: string;
}) {
  const shown = verdict ?? "unknown";
  const { word, tone } = words[shown];
  const box = size === "bench" ? "gap-2.5 px-4 py-2 text-xl" : "gap-1.5 px-2 py-0.5 text-sm";
  return (
    <span
      data-verdict={shown}
      className={`inline-flex items-center rounded-sm border font-semibold whitespace-nowrap print:border-ink print:bg-transparent print:text-ink ${badgeTones[tone]} ${box} ${className}`}
    >
      <VerdictIcon verdict={shown} size={size === "bench" ? 28 : 17} className="shrink-0" />
      {label ?? word}
    </span>
  );
}
