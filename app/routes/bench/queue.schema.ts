import { z } from "zod";

/** Filters of the queue, as they stand in the address; anything unknown falls back to the default. */
export const queueParamsSchema = z.object({
  state: z.enum(["submitted", "on_bench", "awaiting_signature", "sent_back", "all"]).catch("submitted"),
  q: z.string().trim().max(100).catch(""),
  battery: z.enum(["any", "yes", "no"]).catch("any"),
});

export const turnSchema = z.object({
  act: z.enum(["take", "release"]),
  unit: z.number().int().positive(),
  version: z.number().int().positive(),
});
