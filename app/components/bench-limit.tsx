import type { Limit } from "~/engine/bench-check";
import type { Citation } from "~/engine/rule-set";
import { figure } from "~/engine/figure";

/** A limit in words: "at most 0.3 Ω". */
export function limitText(limit: Limit): string {
  switch (limit.kind) {
    case "at-most":
      return `at most ${figure(limit.value)} ${limit.unit}`;
    case "at-least":
      return `at least ${figure(limit.value)} ${limit.unit}`;
    case "between":
      return `${figure(limit.lower)} to ${figure(limit.upper)} ${limit.unit}`;
  }
}

/** The same with signs, for tables: "≤ 0.3 Ω". */
export function limitSigns(limit: Limit): string {
  switch (limit.kind) {
    case "at-most":
      return `≤ ${figure(limit.value)} ${limit.unit}`;
    case "at-least":
      return `≥ ${figure(limit.value)} ${limit.unit}`;
    case "between":
      return `${figure(limit.lower)} … ${figure(limit.upper)} ${limit.unit}`;
  }
}

const markWords: Record<Citation["mark"], string> = {
  V: "as a public page of the source says",
  M: "from memory – check against your own copy",
  C: "computed from a stated formula",
};

/** Where a value comes from, and how sure of it we are. */
export function CitationText({ citation }: { citation: Citation }) {
  const place = [citation.standard, citation.clause, citation.edition]
    .filter((part) => part !== "")
    .join(", ");
  return (
    <span>
      {place}
      <span className={citation.mark === "M" ? "font-medium text-undecided" : "text-ink-soft"}>
        {` (${markWords[citation.mark]})`}
      </span>
      {citation.note ? <span className="block text-sm text-ink-soft">{citation.note}</span> : null}
    </span>
  );
}
