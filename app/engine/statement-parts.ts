import type { Analysis, Statement, StatementFamily, StatementLevel, Verdict3 } from "./analysis";
import type { Reason } from "./bench-check";

/** What the statements are made from: everything of an analysis but the statements and problems themselves. */
export type Results = Omit<Analysis, "statements" | "problems">;

/** Level of a verdict: a fail is a defect unless somebody could be hurt at once. */
export const levelOf = (verdict: Verdict3, onFail: StatementLevel = "defect"): StatementLevel =>
  verdict === "fail" ? onFail : verdict === "unknown" ? "unknown" : "good";

/** A statement whose id stays the same for the same finding. */
export function say(
  family: StatementFamily,
  id: string,
  level: StatementLevel,
  text: string,
  elements: string[] = [],
  conductors: string[] = [],
): Statement {
  return {
    id: `${family} ${id}`,
    family,
    level,
    text,
    elements: [...new Set(elements)],
    conductors: [...new Set(conductors)],
  };
}

export const fromReason = (
  family: StatementFamily,
  id: string,
  level: StatementLevel,
  { text, elements, conductors }: Reason,
) => say(family, id, level, text, elements, conductors);
