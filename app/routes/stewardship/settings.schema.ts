import { z } from "zod";
import { oneLine } from "~/engine/typed-text";

const settings = {
  name: oneLine("Enter the workshop’s name.", 120),
  timeZone: z.string({ error: "Choose the time zone." }).max(60, "Choose the time zone."),
  accuracyPolicy: z.enum(["rect", "maker-k2"], { error: "Choose how accuracy becomes uncertainty." }),
  recheckMonths: z
    .number({ error: "Enter a whole number of months." })
    .int("Enter a whole number of months.")
    .min(1, "At least one month.")
    .max(60, "At most 60 months: nobody can answer for longer."),
};

/** Key and version of a rule set, as the value of a choice. */
const ruleSet = z
  .string({ error: "Choose a rule set." })
  .regex(/^[\w-]+@[\w.-]+$/, "Choose a rule set.")
  .transform((value) => {
    const [ruleSetKey = "", ruleSetVersion = ""] = value.split("@");
    return { ruleSetKey, ruleSetVersion };
  });

const seen = z.object({ ...settings, ruleSetKey: z.string(), ruleSetVersion: z.string() });

export const settingsSchema = z.object({
  ...settings,
  ruleSet,
  /** The settings that the form was made from, as JSON, so that a change by somebody else is noticed. */
  seen: z.string().transform((text, context) => {
    try {
      return seen.parse(JSON.parse(text));
    } catch {
      context.addIssue({ code: "custom", message: "Load the page again." });
      return z.NEVER;
    }
  }),
});
