import { z } from "zod";

export const finishSchema = z.object({
  act: z.literal("finish"),
  version: z.number().int().positive(),
});

export const sendBackSchema = z.object({
  act: z.literal("send-back"),
  version: z.number().int().positive(),
  reason: z
    .string({ error: "Say why the unit goes back." })
    .trim()
    .min(1, "Say why the unit goes back.")
    .max(2000),
});
