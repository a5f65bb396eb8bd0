import { z } from "zod";

/** A person's name, as it stands in records. */
export const nameField = z
  .string({ error: "Enter a name." })
  .trim()
  .min(1, "Enter a name.")
  .max(120, "Names have at most 120 characters.");
