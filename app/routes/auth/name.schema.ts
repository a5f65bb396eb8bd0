import { oneLine } from "~/engine/typed-text";

/** A person's name, as it stands in records. */
export const nameField = oneLine("Enter a name.", 120);
