import { z } from "zod";
import { oneLine } from "~/engine/typed-text";

const day = (missing: string) => z.iso.date({ error: missing });

export const addLicenceSchema = z
  .object({
    intent: z.literal("add"),
    personId: z
      .number({ error: "Choose the electrician." })
      .int("Choose the electrician.")
      .positive("Choose the electrician."),
    holderName: oneLine("Enter the holder’s name as the licence says it.", 120),
    number: oneLine("Enter the licence’s number.", 60),
    authority: oneLine("Enter who issued it.", 120),
    validFrom: day("Enter the first day on which it counts."),
    validTo: day("Enter the last day on which it counts."),
    maxSupplyVolts: z
      .number({ error: "Enter a whole number of volts, such as 230." })
      .int("Enter a whole number of volts.")
      .min(1, "Enter a voltage above zero.")
      .max(1000, "Mainsgate is for equipment up to 1000 V."),
    coversBatteries: z.boolean().default(false),
  })
  .refine(({ validFrom, validTo }) => validFrom <= validTo, {
    path: ["validTo"],
    error: "The last day lies before the first.",
  });

export const revokeLicenceSchema = z.object({
  intent: z.literal("revoke"),
  licence: z.number().int().positive(),
});
