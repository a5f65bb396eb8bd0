import { refusal } from "./answers.server";

/** The largest index, the deepest nesting and the longest name that a field of ours can have, with room to spare. */
const LARGEST_INDEX = 200;
const DEEPEST = 6;
const LONGEST_NAME = 200;
/** 500 ticked checks, and what stands beside them. */
const MOST_FIELDS = 520;

/** Conform's own fields: no form of ours needs them at the server, and what they hold is taken for field names too. */
const CONFORM_FIELDS = ["__intent__", "__state__"];

/**
 * The one way in which actions read a form. Conform builds objects and arrays out of the names of fields, so names that
 * would make huge or endlessly nested ones are refused before it sees them.
 *
 * @throws a 415 answer when the body is no form, a 400 answer when it is broken, holds files or has impossible fields
 */
export async function readForm(request: Request): Promise<FormData> {
  const contentType = (request.headers.get("Content-Type") ?? "").split(";")[0]?.trim().toLowerCase();
  if (contentType !== "application/x-www-form-urlencoded" && contentType !== "multipart/form-data") {
    throw refusal(415, "This address takes what a form sends, and nothing else. Nothing was changed.");
  }
  let form: FormData;
  try {
    form = await request.formData();
  } catch {
    throw refusal(400, "The form did not arrive whole. Nothing was changed; please send it again.");
  }
  for (const name of CONFORM_FIELDS) form.delete(name);
  const reason = whyNot([...form.entries()]);
  if (reason !== null) throw refusal(400, `${reason} Nothing was changed.`);
  return form;
}

function whyNot(entries: readonly (readonly [string, FormDataEntryValue])[]): string | null {
  if (entries.length > MOST_FIELDS) return `A form may have at most ${MOST_FIELDS} fields.`;
  for (const [name, value] of entries) {
    if (name.length > LONGEST_NAME) return "A field of this form has too long a name.";
    const parts = name.split(/[.[\]]+/).filter((part) => part !== "");
    if (parts.length > DEEPEST) return "A field of this form is nested too deeply.";
    if (parts.some((part) => /^\d+$/.test(part) && Number(part) > LARGEST_INDEX)) {
      return "A list in this form is too long.";
    }
    if (parts.some((part) => part === "__proto__" || part === "constructor" || part === "prototype")) {
      return "A field of this form has a name that is not taken.";
    }
    if (typeof value !== "string") return "This form takes no files.";
  }
  return null;
}
