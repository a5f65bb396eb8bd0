import { z } from "zod";
import { instrumentKinds } from "~/engine/bench-check";
import { oneLine } from "~/engine/typed-text";

/** A number as people type it, with comma or point. */
const decimal = (missing: string) =>
  z
    .string({ error: missing })
    .trim()
    .transform((typed, context) => {
      const value = /^[+-]?\d{1,12}([.,]\d{1,9})?$/.test(typed)
        ? Number(typed.replace(",", "."))
        : Number.NaN;
      if (Number.isFinite(value)) return value;
      context.addIssue({ code: "custom", message: "Write it as a number, such as 0.5." });
      return z.NEVER;
    });

const calibration = {
  calibratedOn: z.iso.date({ error: "Enter the day of the calibration." }),
  calibrationDue: z.iso.date({ error: "Enter the last day on which it counts." }),
  certificate: oneLine("Enter the certificate’s number.", 120),
};

const inOrder = ({ calibratedOn, calibrationDue }: { calibratedOn: string; calibrationDue: string }) =>
  calibratedOn <= calibrationDue;
const outOfOrder = { path: ["calibrationDue"], error: "The last day lies before the calibration." };

export const addInstrumentSchema = z
  .object({
    name: oneLine("Enter what it is called in the workshop.", 120),
    kind: z.enum(instrumentKinds, { error: "Choose what kind of instrument it is." }),
    serial: oneLine("Enter the serial number.", 80),
    ...calibration,
  })
  .refine(inOrder, outOfOrder);

export const recalibrateSchema = z
  .object({ intent: z.literal("recalibrate"), ...calibration })
  .refine(inOrder, outOfOrder);

/** Units in which ranges are stated: those that readings can have. */
export const rangeUnits = [
  "mΩ",
  "Ω",
  "kΩ",
  "MΩ",
  "GΩ",
  "mV",
  "V",
  "kV",
  "µA",
  "mA",
  "A",
  "mm",
  "cm",
  "ms",
  "s",
  "W",
  "nF",
  "µF",
  "°C",
] as const;

export const rangeSchema = z
  .object({
    intent: z.literal("add-range"),
    unit: z.enum(rangeUnits, { error: "Choose the unit." }),
    lower: decimal("Enter where the range begins."),
    upper: decimal("Enter where the range ends."),
    percent: decimal("Enter the share of the reading.").refine((value) => value >= 0 && value <= 100, {
      error: "Between 0 and 100 %.",
    }),
    digits: decimal("Enter the digits, or 0.").refine((value) => value >= 0 && value <= 1000, {
      error: "Between 0 and 1000.",
    }),
    resolution: decimal("Enter the smallest step of the display.").refine((value) => value > 0, {
      error: "Above zero.",
    }),
  })
  .refine(({ lower, upper }) => lower < upper, { path: ["upper"], error: "The range ends before it begins." })
  .refine(({ percent, digits }) => percent + digits > 0, {
    path: ["percent"],
    error: "No instrument is exact: state the share of the reading, the digits or both.",
  });

const removeRangeSchema = z.object({
  intent: z.literal("remove-range"),
  range: z.number().int().positive(),
});

export const instrumentActionSchema = z.discriminatedUnion("intent", [
  recalibrateSchema,
  rangeSchema,
  removeRangeSchema,
  z.object({ intent: z.literal("retire") }),
  z.object({ intent: z.literal("take-back") }),
]);
