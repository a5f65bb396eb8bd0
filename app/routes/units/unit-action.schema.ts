import { z } from "zod";

const version = z.coerce.number().int().positive();

export const unitActionSchema = z.discriminatedUnion("intent", [
  z.object({ intent: z.literal("submit"), version }),
  z.object({ intent: z.literal("discard"), version }),
  /** Begins a new version of it. */
  z.object({ intent: z.literal("succeed"), version }),
  /** Gives it to another builder. */
  z.object({
    intent: z.literal("hand-over"),
    version,
    to: z.coerce.number({ error: "Choose a builder." }).int().positive("Choose a builder."),
  }),
]);
