/**
 * The sentences with which an action refused a form, whatever shape its answer has: `{ message }`, `{ conflict }`, or
 * conform's result with errors by field. Empty when it did not refuse.
 */
export function refusalsIn(answer: unknown): string[] {
  if (typeof answer !== "object" || answer === null) return [];
  const members = new Map<string, unknown>(Object.entries(answer));
  const said = [members.get("conflict"), members.get("message")].filter(isText);
  const errors = members.get("error");
  const byField =
    typeof errors === "object" && errors !== null ? Object.values(errors).flat().filter(isText) : [];
  const all = [...new Set([...said, ...byField])];
  if (all.length === 0 && members.get("status") === "error") return ["This was not accepted."];
  return all;
}

function isText(value: unknown): value is string {
  return typeof value === "string" && value !== "";
}
