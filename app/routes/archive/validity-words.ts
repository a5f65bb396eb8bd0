import { stateTitles, type Validity } from "~/workflow/states";

export interface ValidityWords {
  title: string;
  text: string;
  tone: "pass" | "undecided" | "fail";
}

/**
 * What a person who stands before the unit must know, in a line and a sentence. With departures (it was signed although
 * a check fails) it is never told as plainly good.
 */
export function validityWords(validity: Validity, departures: boolean): ValidityWords {
  switch (validity.kind) {
    case "may-be-used":
      if (departures) {
        return {
          title: "May be plugged in, with departures",
          text: "Not every check passed; the signer allowed it under the conditions stated here.",
          tone: "undecided",
        };
      }
      return {
        title: "May be plugged in",
        text: "Under the conditions stated here and as long as nothing on the unit was changed.",
        tone: "pass",
      };
    case "recheck-due":
      if (departures) {
        return {
          title: "May be plugged in, with departures; recheck due",
          text: "Not every check passed; the signer allowed it under the conditions stated here. It must be checked again soon.",
          tone: "undecided",
        };
      }
      return {
        title: "May be plugged in, recheck due",
        text: "Under the conditions stated here, but it must be checked again soon.",
        tone: "undecided",
      };
    case "lapsed":
      return {
        title: "Must not be plugged in: lapsed",
        text: "The day of its recheck has passed. Unplug it; a new version of it must be examined and signed first.",
        tone: "fail",
      };
    case "must-not-be-used":
      return {
        title: `Must not be plugged in: ${stateTitles[validity.because].toLowerCase()}`,
        text:
          validity.because === "superseded"
            ? "A newer version was signed in its place; the code on that one counts. Unplug this one and mark it, so that nobody uses it."
            : "Unplug it and mark it, so that nobody uses it.",
        tone: "fail",
      };
  }
}
