import { describeIssue } from "~/engine/describe-issue";
import { energyMapSchema, type EnergyMap } from "~/engine/energy-map";

export type ImportResult = { ok: true; map: EnergyMap } | { ok: false; errors: string[] };

const SHOWN = 12;

/** Reads an energy map from JSON text; every complaint says where it is. */
export function importMap(text: string): ImportResult {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    return { ok: false, errors: [syntaxError(text, error)] };
  }
  const parsed = energyMapSchema.safeParse(value);
  if (parsed.success) return { ok: true, map: parsed.data };
  const errors = parsed.error.issues.map((issue) => describeIssue(issue, value));
  const more = errors.length - SHOWN;
  return { ok: false, errors: more > 0 ? [...errors.slice(0, SHOWN), `And ${more} more.`] : errors };
}

/** Engines tell the place in different ways, or not at all; the line is what a person can find. */
function syntaxError(text: string, error: unknown): string {
  if (text.trim() === "") return "There is nothing to read.";
  const message = error instanceof Error ? error.message : "";
  const byLine = /line (\d+) column (\d+)/.exec(message);
  if (byLine) return `This is no valid JSON: look at line ${byLine[1]}, column ${byLine[2]}.`;
  const byPosition = /position (\d+)/.exec(message);
  if (byPosition) {
    const before = text.slice(0, Number(byPosition[1])).split("\n");
    return `This is no valid JSON: look at line ${before.length}, column ${(before.at(-1) ?? "").length + 1}.`;
  }
  return /end of|unterminated/i.test(message)
    ? "This is no valid JSON: it ends too early."
    : "This is no valid JSON.";
}
