import { data } from "react-router";
import { answerTo } from "~/middleware/answers.server";
import { ConflictError, GuardError } from "~/services/errors";

export interface Refusal {
  message: string;
  /** Guards that stand in the way, each a sentence. */
  reasons: string[] | null;
  /** Somebody else acted first. */
  conflict: boolean;
}

/** What the pages of a unit say beside their forms when a transition was refused; anything else takes the whole page. */
export function refuse(error: unknown) {
  if (error instanceof GuardError) return refusal(422, error.message, { reasons: [...error.reasons] });
  if (error instanceof ConflictError) return refusal(409, error.message, { conflict: true });
  throw answerTo(error);
}

/** A form that doesn't fit its schema: made by hand, or by a page of an older version. */
export function refuseUnreadable() {
  return refusal(400, "This form can’t be read. Please load the page again.");
}

function refusal(status: number, message: string, more: Partial<Refusal> = {}) {
  return data<Refusal>({ message, reasons: null, conflict: false, ...more }, { status });
}
