import { figure } from "~/engine/figure";

/** An observation as far as its text needs it. */
export interface ReadingSource {
  kind: "measured" | "examined" | "not-applicable" | "not-possible";
  value: number | null;
  bound: "over" | "under" | null;
  unit: string | null;
  conforms: boolean | null;
}

/** What the bench answered, in a few words: "> 200 MΩ", "Conforms". */
export function readingText({ kind, value, bound, unit, conforms }: ReadingSource): string {
  switch (kind) {
    case "measured":
      return `${bound === "over" ? "> " : bound === "under" ? "< " : ""}${value === null ? "no value" : String(value)} ${unit ?? ""}`.trim();
    case "examined":
      return conforms ? "Conforms" : "Does not conform";
    case "not-applicable":
      return "Not applicable";
    case "not-possible":
      return "Not possible";
  }
}

/** "± 0.02 Ω (k = 2)", or that it isn't known. Two figures: more would claim to know the uncertainty better than anybody does. */
export function uncertaintyText(expanded: number | null, unit: string): string {
  return expanded === null
    ? "uncertainty not known"
    : `± ${figure(Number(expanded.toPrecision(2)))} ${unit} (k = 2)`;
}
