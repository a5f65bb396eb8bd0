import type { LineVerdict } from "~/engine/bench-answer";
import { figure } from "~/engine/figure";
import type { RecordCheck, RecordCitation, RecordLimit, RecordObservation } from "./record-format";

/** The words in which a record is printed. */

export const verdictWords: Record<LineVerdict, string> = {
  pass: "Pass",
  fail: "Fail",
  undecided: "Undecided",
  open: "Not done",
  "not-applicable": "Not applicable",
  "not-possible": "Not possible",
};

/** A limit with signs: "≤ 0.3 Ω". */
export function limitWords(limit: RecordLimit): string {
  switch (limit.kind) {
    case "at-most":
      return `≤ ${figure(limit.value)} ${limit.unit}`;
    case "at-least":
      return `≥ ${figure(limit.value)} ${limit.unit}`;
    case "between":
      return `${figure(limit.lower)} … ${figure(limit.upper)} ${limit.unit}`;
  }
}

/** A citation in one line; a value from memory says so. */
export function citationWords(citation: RecordCitation): string {
  const edition = { none: "", "not checked": "edition not checked" }[citation.edition] ?? citation.edition;
  const place = [citation.standard, citation.clause, edition].filter((part) => part !== "").join(", ");
  const mark = {
    V: "as a public page of the source says",
    M: "from memory: check against your own copy",
    C: "computed from a stated formula",
  }[citation.mark];
  return `${place} (${mark})`;
}

/** What the bench answered: "> 200 MΩ", "Conforms", "Not applicable". */
export function observationWords(observation: RecordObservation): string {
  switch (observation.kind) {
    case "measured": {
      const sign = observation.bound === "over" ? "> " : observation.bound === "under" ? "< " : "";
      return `${sign}${observation.value ?? "no value"} ${observation.unit ?? ""}`.trim();
    }
    case "examined":
      return observation.conforms ? "Conforms" : "Does not conform";
    case "not-applicable":
      return "Not applicable";
    case "not-possible":
      return "Not possible";
  }
}

/** "± 0.02 Ω (k = 2)" for a reading, null where there is none to tell. */
export function uncertaintyWords(check: RecordCheck): string | null {
  if (check.asks.kind !== "reading" || !check.judged) return null;
  const { expandedUncertainty, guardBand } = check.judged;
  if (check.observation?.bound) return `guard band: ${guardBand}`;
  if (expandedUncertainty === null) return "uncertainty not known";
  return `± ${figure(expandedUncertainty)} ${check.asks.limit.unit} (k = 2)`;
}

/** A moment in a time zone: "1 Dec 2026, 14:05 CET". */
export function momentWords(iso: string, timeZone: string): string {
  return new Intl.DateTimeFormat("en-GB", {
    timeZone,
    day: "numeric",
    month: "short",
    year: "numeric",
    hour: "2-digit",
    minute: "2-digit",
    timeZoneName: "short",
  }).format(new Date(iso));
}

/** A calendar day: "1 December 2026". */
export function dayWords(day: string): string {
  return new Intl.DateTimeFormat("en-GB", { dateStyle: "long", timeZone: "UTC" }).format(
    new Date(`${day}T00:00:00Z`),
  );
}

/** How many checks stand at each verdict, in words, leaving out none that occurs. */
export function tally(checks: readonly RecordCheck[]): string {
  const order: LineVerdict[] = ["pass", "fail", "undecided", "open", "not-applicable", "not-possible"];
  return order
    .map((verdict) => ({ verdict, count: checks.filter((check) => check.verdict === verdict).length }))
    .filter(({ count }) => count > 0)
    .map(({ verdict, count }) => `${count} ${verdictWords[verdict].toLowerCase()}`)
    .join(", ");
}
