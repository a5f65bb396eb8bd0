import { z } from "zod";

/**
 * Gives zod words for people wherever a schema has none of its own. Called once by root.tsx, for server and browser.
 */
export function speakPlainly(): void {
  z.config({ customError: wordsFor });
}

function wordsFor(issue: z.core.$ZodRawIssue): string {
  switch (issue.code) {
    case "invalid_type":
      if (issue.input === undefined) return "This is missing.";
      if (issue.expected === "int") return "Write a whole number.";
      return issue.expected === "number" ? "Write a number." : "This does not fit here.";
    case "too_big":
      if (issue.origin === "string") return `At most ${String(issue.maximum)} characters.`;
      return issue.inclusive === false
        ? `Less than ${String(issue.maximum)}.`
        : `At most ${String(issue.maximum)}.`;
    case "too_small":
      if (issue.origin === "string")
        return issue.minimum === 1 ? "This is missing." : `At least ${String(issue.minimum)} characters.`;
      return issue.inclusive === false
        ? `More than ${String(issue.minimum)}.`
        : `At least ${String(issue.minimum)}.`;
    case "invalid_value":
      return "Choose one of what is offered.";
    case "unrecognized_keys":
      return `Not known here: ${issue.keys.join(", ")}.`;
    case "invalid_format":
      return "This is not written as it should be.";
    default:
      return "This does not fit here.";
  }
}
