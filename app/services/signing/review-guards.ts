/** Why a guard stands in the way: a sentence, and what it is about, for a link. */
export interface GuardReason {
  text: string;
  checkKey?: string;
  findingNumber?: number;
}

/** What can be told before anything is typed: every guard of a signature but those of the form itself. */
export const reviewGuards = [
  "independent",
  "licence-in-date",
  "licence-in-scope",
  "checks-decided",
  "photos-present",
  "no-open-danger",
  "instruments-in-calibration",
] as const;
export type ReviewGuard = (typeof reviewGuards)[number];
