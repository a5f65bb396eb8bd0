import type { SubmissionResult } from "@conform-to/react";
import { data } from "react-router";
import { ConflictError, GuardError, InvalidInputError, ServiceError } from "~/services/errors";

interface Replier {
  reply(options?: {
    formErrors?: string[];
    fieldErrors?: Record<string, string[]>;
  }): SubmissionResult<string[]>;
}

/** What an action answers when it couldn't do what the form asked: conform's result, and the conflict if it was one. */
export type FormRefusal = SubmissionResult<string[]> & { conflict: string | null };

/**
 * Turns a service's refusal into an answer for the form itself, so that nothing typed is lost: a field's error beside
 * the field, guards as a list at the top, a conflict as a message of its own. Anything else is rethrown.
 */
export function refuseForm(error: unknown, submission: Replier) {
  if (!(error instanceof ServiceError)) throw error;
  const init = { status: error.status };
  if (error instanceof ConflictError) {
    return data<FormRefusal>({ ...submission.reply(), conflict: error.message }, init);
  }
  const reply =
    error instanceof InvalidInputError && error.field !== ""
      ? submission.reply({ fieldErrors: { [error.field]: [error.message] } })
      : submission.reply({
          formErrors: error instanceof GuardError ? [...error.reasons] : [error.message],
        });
  return data<FormRefusal>({ ...reply, conflict: null }, init);
}
