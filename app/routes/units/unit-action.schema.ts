import { z } from "zod";

export const unitActionSchema = z.object({
  intent: z.enum(["submit", "discard"]),
  version: z.coerce.number().int().positive(),
});
