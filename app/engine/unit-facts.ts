import { z } from "zod";

/** What the engine needs to know of the unit beside its map. */
export const unitFactsSchema = z.object({
  /** Nominal supply voltage, V rms, line to neutral. */
  supplyVolts: z.number().positive().max(1000),
  supplyHertz: z.number().positive().max(1000),
  protectionClass: z.enum(["I", "II"]),
  /** Length of the supply cord, m; absent or `null` = not known. */
  cordLengthM: z.number().positive().max(1000).nullable().optional(),
  /** Cross-section of the cord's protective core, mm²; absent or `null` = not known. */
  cordAreaMm2: z.number().positive().max(100).nullable().optional(),
  /** Held in the hand in use; absent or `null` = not known. */
  handheld: z.boolean().nullable().optional(),
  /** Height above sea level of the place of use, m; absent or `null` = not known, up to 2000 is then assumed and said so. */
  altitudeM: z.number().nonnegative().max(20_000).nullable().optional(),
});
export type UnitFacts = z.infer<typeof unitFactsSchema>;
