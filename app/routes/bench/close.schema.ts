import { z } from "zod";
import { lines } from "~/engine/typed-text";

export const finishSchema = z.object({
  act: z.literal("finish"),
  version: z.number().int().positive(),
});

export const sendBackSchema = z.object({
  act: z.literal("send-back"),
  version: z.number().int().positive(),
  reason: lines("Say why the unit goes back.", 2000),
});
