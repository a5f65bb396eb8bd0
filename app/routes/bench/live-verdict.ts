import {
  accuracyAt,
  type BenchAnswer,
  judgeBenchReading,
  type LineVerdict,
  lineVerdict,
  readingObjection,
} from "~/engine/bench-answer";
import type { BenchCheck } from "~/engine/bench-check";
import type { Judgement, UncertaintyPolicy } from "~/engine/verdict";
import type { BenchInstrument } from "~/services/bench/load-check.server";
import type { AnswerDraft } from "./answer-draft";
import { decimal } from "./check.schema";

export type LiveVerdict =
  | { kind: "verdict"; verdict: LineVerdict; because: string; judged: Judgement | null }
  | { kind: "incomplete"; hint: string };

/** The verdict of what is typed so far, by the same code that judges it on the server; a hint while something is missing. */
export function judgeDraft(
  check: BenchCheck,
  draft: AnswerDraft,
  instruments: readonly BenchInstrument[],
  policy: UncertaintyPolicy,
): LiveVerdict {
  const answer = answerOf(check, draft, instruments, policy);
  if (typeof answer === "string") return { kind: "incomplete", hint: answer };
  return {
    kind: "verdict",
    ...lineVerdict(check.computed?.verdict ?? null, answer),
    judged: answer.kind === "measured" ? answer.judgement : null,
  };
}

function answerOf(
  { asks }: BenchCheck,
  draft: AnswerDraft,
  instruments: readonly BenchInstrument[],
  policy: UncertaintyPolicy,
): BenchAnswer | string {
  if (draft.kind !== "answer") {
    return draft.reason.trim() === "" ? "Give the reason." : { kind: draft.kind };
  }
  if (asks.kind === "examination") {
    return draft.conforms === ""
      ? "Choose what you found."
      : { kind: "examined", conforms: draft.conforms === "yes" };
  }
  if (draft.value.trim() === "") return "Enter the reading. A blank is never taken as nought.";
  const value = decimal.safeParse(draft.value);
  if (!value.success) return value.error.issues[0]?.message ?? "Write the reading as a number.";
  const objection = readingObjection(value.data, draft.unit);
  if (objection) return objection;
  const instrument = instruments.find(({ id }) => String(id) === draft.instrumentId);
  if (!instrument) return "Choose the instrument: its accuracy decides with.";
  const reading = {
    value: value.data,
    unit: draft.unit,
    bound: draft.bound === "shown" ? null : draft.bound,
  };
  const accuracy = accuracyAt(instrument.ranges, reading.value, reading.unit);
  return { kind: "measured", judgement: judgeBenchReading(asks.limit, reading, accuracy, policy) };
}
