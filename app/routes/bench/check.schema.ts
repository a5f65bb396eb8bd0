import { z } from "zod";
import { lines, perhapsLines } from "~/engine/typed-text";
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

const text = (most: number) => perhapsLines(most).default("");

const answered = {
  act: z.literal("observe"),
  key: z.string("Load the page again.").min(1, "Load the page again.").max(190, "Load the page again."),
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
    unit: z.string({ error: "Choose the unit." }).max(20, "Choose the unit."),
    instrumentId: z
      .number({ error: "Choose the instrument that you measured with." })
      .int("Choose the instrument that you measured with.")
      .positive("Choose the instrument that you measured with."),
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
  key: z.string().max(190, "Load the page again.").optional(),
  severity: z.enum(severities, { error: "Say how bad it is." }),
  element: z.string().max(40, "Choose one of the elements.").optional(),
  text: lines("Say what is wrong.", 4000),
});

export const closingSchema = z.object({
  act: z.literal("close-finding"),
  finding: z.number().int().positive(),
  text: lines("Say what you saw that lets you close it.", 4000),
});
