import { z } from "zod";
import { parseAmount } from "~/components/parse-amount";
import { lines, oneLine } from "~/engine/typed-text";

/** A number as typed; the bounds are those of the engine's facts. */
function amount(missing: string, bounds: { above?: number; from?: number; most: number; unit: string }) {
  return z
    .string({ error: missing })
    .trim()
    .transform((typed, context) => {
      const value = parseAmount(typed);
      const tooSmall =
        value !== null && (bounds.above !== undefined ? value <= bounds.above : value < (bounds.from ?? 0));
      if (value !== null && !tooSmall && value <= bounds.most) return value;
      const message =
        value === null
          ? "Write it as a number, such as 230."
          : tooSmall
            ? `More than ${bounds.above ?? bounds.from} ${bounds.unit}.`
            : `At most ${bounds.most} ${bounds.unit}.`;
      context.addIssue({ code: "custom", message });
      return z.NEVER;
    });
}

/** Left empty means not known. */
const optional = <Value>(schema: z.ZodType<Value, string>) =>
  z
    .union([z.literal("").transform(() => null), schema])
    .optional()
    .transform((value) => value ?? null);

export const unitFormSchema = z.object({
  name: oneLine("Give it a name that people in the workshop will recognise.", 120),
  purpose: lines("Say what it does and what it is for.", 1000),
  placeOfUse: oneLine("Say where it will be used.", 300),
  supplyVolts: amount("Enter the supply voltage.", { above: 0, most: 1000, unit: "V" }),
  supplyHertz: amount("Enter the supply frequency.", { above: 0, most: 1000, unit: "Hz" }),
  protectionClass: z.enum(["I", "II"], { error: "Choose the protection class." }),
  cordLengthM: optional(amount("", { above: 0, most: 1000, unit: "m" })),
  cordAreaMm2: optional(amount("", { above: 0, most: 100, unit: "mm²" })),
  handheld: z
    .enum(["yes", "no", "unknown"], { error: "Choose one; “not known” is an answer too." })
    .transform((answer) => (answer === "unknown" ? null : answer === "yes")),
  altitudeM: optional(amount("", { from: 0, most: 20_000, unit: "m" })),
});

export const unitFieldLabels: Record<keyof z.output<typeof unitFormSchema>, string> = {
  name: "Name",
  purpose: "What it is for",
  placeOfUse: "Where it will be used",
  supplyVolts: "Supply voltage",
  supplyHertz: "Supply frequency",
  protectionClass: "Protection class",
  cordLengthM: "Length of the supply cord",
  cordAreaMm2: "Cross-section of the cord",
  handheld: "Held in the hand in use",
  altitudeM: "Height above sea level",
};
