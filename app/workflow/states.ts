/** Stored states of a unit. "Recheck due" and "lapsed" follow from dates: see {@link validity}. */
export const unitStates = [
  "draft",
  "submitted",
  "on_bench",
  "awaiting_signature",
  "sent_back",
  "signed",
  "refused",
  "withdrawn",
  "superseded",
] as const;

export type UnitState = (typeof unitStates)[number];

export const stateTitles: Record<UnitState, string> = {
  draft: "Draft",
  submitted: "Submitted",
  on_bench: "On the bench",
  awaiting_signature: "Awaiting signature",
  sent_back: "Sent back",
  signed: "Signed",
  refused: "Refused",
  withdrawn: "Withdrawn",
  superseded: "Superseded",
};

/** States in which a decision has been made and the record stands in the archive. */
export const archivedStates = ["signed", "refused", "withdrawn", "superseded"] as const satisfies UnitState[];

export type Validity =
  | { kind: "may-be-used"; recheckOn: string }
  | { kind: "recheck-due"; recheckOn: string }
  | { kind: "lapsed"; recheckOn: string }
  | { kind: "must-not-be-used"; because: UnitState };

const DAY = 86_400_000;

/**
 * Whether a unit may be used on a day. Computed from state and recheck date, never stored.
 * The recheck is announced as due during its last 30 days; from the day after `recheckOn` the signature has lapsed.
 *
 * @param recheckOn ISO date (YYYY-MM-DD) of the signature in force, or null when there is none
 * @param today ISO date in the workshop's time zone
 */
export function validity(state: UnitState, recheckOn: string | null, today: string): Validity {
  if (state !== "signed" || recheckOn === null) return { kind: "must-not-be-used", because: state };
  if (today > recheckOn) return { kind: "lapsed", recheckOn };
  const daysLeft = (Date.parse(recheckOn) - Date.parse(today)) / DAY;
  return daysLeft <= 30 ? { kind: "recheck-due", recheckOn } : { kind: "may-be-used", recheckOn };
}
