import { z } from "zod";
import type { BenchCheck } from "~/engine/bench-check";
import type { BenchInstrument } from "~/services/bench/load-check.server";

const answerDraftSchema = z.object({
  kind: z.enum(["answer", "not-applicable", "not-possible"]),
  value: z.string(),
  bound: z.enum(["shown", "over", "under"]),
  unit: z.string(),
  instrumentId: z.string(),
  conditions: z.string(),
  conforms: z.enum(["", "yes", "no"]),
  reason: z.string(),
  note: z.string(),
});

/** What is typed into the step's form, as text: also what makes no sense yet is kept. */
export type AnswerDraft = z.infer<typeof answerDraftSchema>;

/** What the browser kept of a form; null when it is no draft of this version. */
export function parseAnswerDraft(kept: unknown): AnswerDraft | null {
  const parsed = answerDraftSchema.safeParse(kept);
  return parsed.success ? parsed.data : null;
}

/** Whether an instrument may be used today. */
export function isUsable({ calibration }: Pick<BenchInstrument, "calibration">): boolean {
  return calibration === "in-calibration" || calibration === "due-soon";
}

/** An empty form; the instrument is chosen beforehand only where there is no choice. */
export function emptyAnswer({ asks }: BenchCheck, instruments: readonly BenchInstrument[]): AnswerDraft {
  const usable = instruments.filter(isUsable);
  return {
    kind: "answer",
    value: "",
    bound: "shown",
    unit: asks.kind === "reading" ? asks.unit : "",
    instrumentId: usable.length === 1 && usable[0] ? String(usable[0].id) : "",
    conditions: "",
    conforms: "",
    reason: "",
    note: "",
  };
}
