import type { LineVerdict } from "~/engine/bench-answer";
import type { BenchCheck, CheckFamily } from "~/engine/bench-check";
import type { FindingView, SheetLine } from "./sheet-view";

/** What must be known to be sound before a unit gets mains: all of it is found out with the plug pulled. */
const deadFamilies: readonly CheckFamily[] = ["protective-earth", "insulation", "double-pole-isolation"];

/**
 * Why mains must not be connected for a check that is done with mains on, a sentence each: dead checks of earth,
 * insulation and isolation that have not passed, and open findings of danger. Empty for a check that is done dead.
 */
export function beforeMains(
  check: Pick<BenchCheck, "energised">,
  lines: readonly (Pick<SheetLine, "verdict"> & {
    check: Pick<BenchCheck, "energised" | "family" | "title">;
  })[],
  findings: readonly Pick<FindingView, "number" | "severity" | "text" | "closing">[],
): string[] {
  if (!check.energised) return [];
  return [
    ...lines
      .filter((line) => !line.check.energised && deadFamilies.includes(line.check.family))
      .flatMap((line) => {
        const words = standing(line.verdict);
        return words === null ? [] : [`${line.check.title}: ${words}.`];
      }),
    ...findings
      .filter(({ severity, closing }) => severity === "danger" && closing === null)
      .map(({ number, text }) => `Finding ${number}, danger, is open: ${text}`),
  ];
}

function standing(verdict: LineVerdict): string | null {
  switch (verdict) {
    case "pass":
      return null;
    case "fail":
      return "failed";
    case "undecided":
      return "undecided";
    case "open":
      return "not done yet";
    case "not-applicable":
      return "left out as not applicable";
    case "not-possible":
      return "could not be done";
  }
}
