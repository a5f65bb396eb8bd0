import { z } from "zod";

export const withdrawSchema = z.object({
  version: z.number().int().positive(),
  reason: z
    .string("Say why it is withdrawn.")
    .trim()
    .min(10, "Say why it is withdrawn, in a sentence.")
    .max(4000),
  password: z.string("Type your password: it is asked for in the act.").min(1).max(200),
});
