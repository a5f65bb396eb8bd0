import type { Statement, Verdict3 } from "./analysis";
import type { BenchCheck, ComputedAnswer, Reason } from "./bench-check";
import type { Citation } from "./rule-set";

/** Pieces that many checks are put together from. */

/** Key of a check: its id and what it is about, so that it is the same in the next revision. */
export const keyOf = (id: string, ...subjects: string[]): string => [id, ...subjects].join(":");

export const because = (text: string, elements: string[] = [], conductors: string[] = []): Reason => ({
  text,
  elements,
  conductors,
});

export const answer = (verdict: Verdict3, reasons: Reason[]): ComputedAnswer => ({ verdict, reasons });

/** Worst of several verdicts; of none it is unknown: absence never passes. */
export function worstVerdict(verdicts: Verdict3[]): Verdict3 {
  if (verdicts.includes("fail")) return "fail";
  return verdicts.length === 0 || verdicts.includes("unknown") ? "unknown" : "pass";
}

export const examination = (question: string, conforms: string, doesNot: string): BenchCheck["asks"] => ({
  kind: "examination",
  question,
  conforms,
  doesNot,
});

export const reasonsOf = (statements: Statement[]): Reason[] =>
  statements.map(({ text, elements, conductors }) => because(text, elements, conductors));

export const practice = (clause: string, note?: string): Citation => ({
  standard: "workshop practice",
  clause,
  edition: "none",
  mark: "M",
  ...(note === undefined ? {} : { note }),
});

export const caution = {
  unplug: "Pull the plug and keep it in sight before you touch anything inside.",
  charge: "Capacitors can hold a dangerous voltage after unplugging. Measure before you touch.",
  battery:
    "A battery can't be switched off: it drives hundreds of amperes into a slipped tool. Take off rings, cover one pole.",
  testVoltage:
    "The test voltage is felt and can be dangerous. Touch nothing during the test and discharge the unit afterwards.",
  live: "This step is done with mains on: behind a residual-current device, with one hand, nobody else touching the unit, covers on unless the step says otherwise.",
  licence: "Where the law says that only licensed people work on mains, they do this step.",
  earthLoop:
    "Make sure that the unit touches no other earthed metal, which would carry test current beside the conductor under test.",
} as const;
