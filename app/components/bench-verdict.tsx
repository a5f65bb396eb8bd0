import { VerdictBadge } from "~/components/ui/verdict-badge";
import { type Verdict, VerdictIcon } from "~/components/ui/verdict-icon";
import type { LineVerdict } from "~/engine/bench-answer";

const shapeOf = (verdict: LineVerdict): Verdict => (verdict === "open" ? "unknown" : verdict);

export const lineVerdictWords: Record<LineVerdict, string> = {
  pass: "Pass",
  fail: "Fail",
  undecided: "Undecided",
  open: "Not done yet",
  "not-applicable": "Not applicable",
  "not-possible": "Not possible",
};

/** Where a line of the bench sheet stands, as shape and word. */
export function LineVerdictBadge({ verdict, size }: { verdict: LineVerdict; size?: "md" | "bench" }) {
  return <VerdictBadge verdict={shapeOf(verdict)} size={size} label={lineVerdictWords[verdict]} />;
}

/** The shape alone, for dense places that say the word elsewhere. */
export function LineVerdictIcon({ verdict, size }: { verdict: LineVerdict; size?: number }) {
  return <VerdictIcon verdict={shapeOf(verdict)} size={size} />;
}
