/** What is kept of a form: the values of the fields by their names. */
export type KeptValues = Readonly<Record<string, string>>;

type Shelf = Pick<Storage, "getItem" | "setItem" | "removeItem">;

/** Reads what was kept under a key; null when there is nothing, or nothing that can be read. */
export function readKept(shelf: () => Shelf, key: string, names: readonly string[]): KeptValues | null {
  try {
    const kept: unknown = JSON.parse(shelf().getItem(key) ?? "null");
    if (typeof kept !== "object" || kept === null) return null;
    const values = Object.entries(kept).filter(
      (entry): entry is [string, string] => names.includes(entry[0]) && typeof entry[1] === "string",
    );
    return values.length === 0 ? null : Object.fromEntries(values);
  } catch {
    // No storage (blocked) or broken text: as if nothing was kept.
    return null;
  }
}

/** Keeps the fields of `names` and no other: passwords and signatures must not lie about in a browser. */
export function keepForm(shelf: () => Shelf, key: string, form: FormData, names: readonly string[]): void {
  const values: Record<string, string> = {};
  for (const name of names) {
    const value = form.get(name);
    if (typeof value === "string") values[name] = value;
  }
  try {
    shelf().setItem(key, JSON.stringify(values));
  } catch {
    // Full or blocked: the form then works without it.
  }
}

export function forgetForm(shelf: () => Shelf, key: string): void {
  try {
    shelf().removeItem(key);
  } catch {
    // Nothing to forget where nothing can be kept.
  }
}

/** What a navigation tells of a form that was sent. */
export interface SentForm {
  state: "idle" | "loading" | "submitting";
  formData?: FormData | undefined;
  location?: { pathname: string } | undefined;
}

/**
 * Whether a sent form was taken: every action of ours that did what it was asked leads to another page. The sign-in
 * page is where one is led whose session has ended: then nothing was done.
 */
export function wasTaken({ state, formData, location }: SentForm, here: string): boolean {
  return (
    state === "loading" &&
    formData !== undefined &&
    location !== undefined &&
    location.pathname !== here &&
    location.pathname !== "/sign-in"
  );
}
