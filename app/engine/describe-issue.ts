interface Issue {
  path: readonly PropertyKey[];
  message: string;
}

/**
 * A schema's complaint as a sentence that says where: 'elements, number 3 ("F1"), ratingAmps: …'.
 *
 * @param whole the value that was checked, to name rows by their own ids
 */
export function describeIssue(issue: Issue, whole: unknown): string {
  const where = issue.path.map((step, index) => {
    if (typeof step !== "number") return String(step);
    const id = idOf(valueAt(whole, issue.path.slice(0, index + 1)));
    return `number ${step + 1}${id === null ? "" : ` (“${id}”)`}`;
  });
  const place = where.length === 0 ? "" : `${where.join(", ")}: `;
  return `${place}${issue.message}`;
}

function valueAt(whole: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>((value, step) => {
    if (typeof value !== "object" || value === null) return undefined;
    return Reflect.get(value, step);
  }, whole);
}

function idOf(value: unknown): string | null {
  if (typeof value !== "object" || value === null || !("id" in value)) return null;
  return typeof value.id === "string" ? value.id.slice(0, 20) : null;
}
