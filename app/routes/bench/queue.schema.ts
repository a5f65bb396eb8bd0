import { z } from "zod";
import { perhapsLines } from "~/engine/typed-text";

/** Filters of the queue, as they stand in the address; anything unknown falls back to the default. */
export const queueParamsSchema = z.object({
  state: z.enum(["submitted", "on_bench", "awaiting_signature", "sent_back", "all"]).catch("submitted"),
  q: z.string().trim().max(100).catch(""),
  battery: z.enum(["any", "yes", "no"]).catch("any"),
});

const turn = { unit: z.number().int().positive(), version: z.number().int().positive() };

export const turnSchema = z.discriminatedUnion("act", [
  z.object({ act: z.literal("take"), ...turn }),
  z.object({ act: z.literal("release"), ...turn }),
  /** Puts it back for an inspector who is absent. */
  z.object({ act: z.literal("reclaim"), ...turn, reason: perhapsLines(1000).default("") }),
]);
