import type { Action } from "./permissions";
import type { UnitState } from "./states";

/** Conditions beyond permission that must hold; each is checked inside the transaction, under the unit's row lock. */
export const guards = [
  "map-complete",
  "findings-answered",
  "nobody-else-on-it",
  "checks-decided",
  "photos-present",
  "no-open-danger",
  "instruments-in-calibration",
  "licence-in-date",
  "licence-in-scope",
  "signer-authenticated",
  "signature-given",
  "reason-given",
] as const;

export type Guard = (typeof guards)[number];

/**
 * Whom a hand-over is told to. The acting person is never told, nor anybody who has left the workshop, and nobody
 * twice: see services/mail/hand-over.server.ts.
 */
export type Audience =
  | "builder"
  /** who has it on the bench, or had it there last */
  | "inspector"
  /** every inspector who may take it */
  | "inspectors"
  /** every electrician who may decide on it */
  | "signers"
  /** every electrician, whatever they have done with it */
  | "electricians";

interface Transition {
  from: readonly UnitState[];
  to: UnitState;
  action: Action;
  guards: readonly Guard[];
  /** Who hears of it by mail; whoever belongs to several is told as the first of them. */
  tells: readonly Audience[];
  /** The verb of the audit entry, as shown in the trail. */
  told: string;
}

/** A unit's life: every transition, with who may make it, what must hold and who hears of it. */
export const transitions = {
  submit: {
    from: ["draft", "sent_back"],
    to: "submitted",
    action: "unit.submit",
    guards: ["map-complete", "findings-answered"],
    tells: ["inspectors"],
    told: "submitted",
  },
  take: {
    from: ["submitted"],
    to: "on_bench",
    action: "bench.take",
    guards: ["nobody-else-on-it"],
    tells: ["builder"],
    told: "took it on the bench",
  },
  release: {
    from: ["on_bench"],
    to: "submitted",
    action: "bench.release",
    guards: [],
    tells: [],
    told: "put it back in the queue",
  },
  reclaim: {
    from: ["on_bench"],
    to: "submitted",
    action: "bench.reclaim",
    guards: ["reason-given"],
    tells: ["inspector"],
    told: "put it back in the queue for an absent inspector",
  },
  finish: {
    from: ["on_bench"],
    to: "awaiting_signature",
    action: "bench.finish",
    guards: ["checks-decided", "photos-present"],
    tells: ["builder", "signers"],
    told: "finished the bench sheet",
  },
  sendBackFromBench: {
    from: ["on_bench"],
    to: "sent_back",
    action: "bench.send-back",
    guards: ["reason-given"],
    tells: ["builder"],
    told: "sent it back from the bench",
  },
  sendBackFromReview: {
    from: ["awaiting_signature"],
    to: "sent_back",
    action: "signing.send-back",
    guards: ["reason-given"],
    tells: ["builder", "inspector"],
    told: "sent it back from review",
  },
  sign: {
    from: ["awaiting_signature"],
    to: "signed",
    action: "signing.sign",
    guards: [
      "checks-decided",
      "photos-present",
      "no-open-danger",
      "instruments-in-calibration",
      "licence-in-date",
      "licence-in-scope",
      "signer-authenticated",
      "signature-given",
    ],
    tells: ["builder", "inspector"],
    told: "signed",
  },
  refuse: {
    from: ["awaiting_signature"],
    to: "refused",
    action: "signing.refuse",
    guards: [
      "licence-in-date",
      "licence-in-scope",
      "signer-authenticated",
      "signature-given",
      "reason-given",
    ],
    tells: ["builder", "inspector"],
    told: "refused",
  },
  withdraw: {
    from: ["signed"],
    to: "withdrawn",
    action: "record.withdraw",
    guards: ["reason-given", "signer-authenticated"],
    tells: ["builder", "inspector", "electricians"],
    told: "withdrew the signature",
  },
  /** Brought about by the signing of a newer version of the unit, in the same transaction. */
  supersede: {
    from: ["signed"],
    to: "superseded",
    action: "record.supersede",
    guards: [],
    tells: ["builder"],
    told: "signed a newer version in its place",
  },
} as const satisfies Record<string, Transition>;

export type TransitionName = keyof typeof transitions;

/** The guards of one transition's row. */
export type GuardOf<Name extends TransitionName> = (typeof transitions)[Name]["guards"][number];

export type Outcome =
  { ok: true; to: UnitState; transition: Transition } | { ok: false; reason: "stale"; state: UnitState };

/** The state that a transition leads to from `state`, or that it no longer applies there. Runs nothing. */
export function transition(state: UnitState, name: TransitionName): Outcome {
  const row: Transition = transitions[name];
  return row.from.includes(state)
    ? { ok: true, to: row.to, transition: row }
    : { ok: false, reason: "stale", state };
}
