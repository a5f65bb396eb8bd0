import { z } from "zod";
import { severities } from "./severities";

/** A number as people type it: comma or point, spaces around it. */
export const decimal = z
  .string({ error: "Enter the reading." })
  .trim()
  .transform((text, context) => {
    const value = /^[+-]?\d{1,12}([.,]\d{1,9})?$/.test(text) ? Number(text.replace(",", ".")) : Number.NaN;
    if (Number.isFinite(value)) return value;
    context.addIssue({ code: "custom", message: "Write the reading as a number, such as 0.27." });
    return z.NEVER;
  });

const text = (most: number) => z.string().trim().max(most, `At most ${most} characters.`).default("");

const answered = {
  act: z.literal("observe"),
  key: z.string().min(1).max(190),
  /** The answer that the form was made on; empty when there was none. */
  latestId: z.number().int().positive().optional(),
  reason: text(1000),
  note: text(4000),
};

export const observeSchema = z.discriminatedUnion("kind", [
  z.object({
    ...answered,
    kind: z.literal("measured"),
    value: decimal,
    bound: z.enum(["shown", "over", "under"], { error: "Say what the display showed." }),
    unit: z.string({ error: "Choose the unit." }).max(20),
    instrumentId: z.number({ error: "Choose the instrument that you measured with." }).int().positive(),
    conditions: text(500),
  }),
  z.object({
    ...answered,
    kind: z.literal("examined"),
    conforms: z.enum(["yes", "no"], { error: "Say whether it conforms." }),
  }),
  z.object({ ...answered, kind: z.enum(["not-applicable", "not-possible"]) }),
]);

export const findingSchema = z.object({
  act: z.literal("raise-finding"),
  /** The check that it hangs on; without one it hangs on an element. */
  key: z.string().max(190).optional(),
  severity: z.enum(severities, { error: "Say how bad it is." }),
  element: z.string().max(40).optional(),
  text: z.string({ error: "Say what is wrong." }).trim().min(1, "Say what is wrong.").max(4000),
});

export const closingSchema = z.object({
  act: z.literal("close-finding"),
  finding: z.number().int().positive(),
  text: z
    .string({ error: "Say what you saw that lets you close it." })
    .trim()
    .min(1, "Say what you saw that lets you close it.")
    .max(4000),
});
