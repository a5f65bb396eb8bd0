import { useFetcher } from "react-router";
import type { clientAction } from "./check";

export interface StepRefusal {
  /** Errors by field; the form's own under "". */
  errors: Record<string, string[] | undefined>;
  conflict: string | null;
}

/** A fetcher for one of the step's forms, with its answer sorted into what was saved and what was refused. */
export function useStepFetcher() {
  const fetcher = useFetcher<typeof clientAction>();
  const answer = fetcher.data;
  const saved = answer && "saved" in answer ? answer.saved : null;
  return { fetcher, saved, refusal: refusalOf(answer), pending: fetcher.state !== "idle" };
}

function refusalOf(answer: ReturnType<typeof useFetcher<typeof clientAction>>["data"]): StepRefusal | null {
  if (!answer || "saved" in answer) return null;
  const errors: StepRefusal["errors"] = {};
  for (const [field, messages] of Object.entries(answer.error ?? {})) {
    if (messages) errors[field] = messages;
  }
  return { errors, conflict: answer.conflict };
}
