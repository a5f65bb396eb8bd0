import { z } from "zod";

/** Filters of the signing queue, as they stand in the address; anything unknown falls back to the default. */
export const signingParamsSchema = z.object({
  q: z.string().trim().max(100).catch(""),
  battery: z.enum(["any", "yes", "no"]).catch("any"),
});
