import { z } from "zod";

/** Marks that turn the direction of writing around: with them a text can be made to look like another one. */
const TURNING = /[\u202A-\u202E\u2066-\u2069]/g;
const LINE_BREAKS = /[\t\n\v\f\r\u0085\u2028\u2029]+/g;
const CONTROLS = /\p{Cc}/gu;
const CONTROLS_BUT_LINES = /(?![\n\r\t])\p{Cc}/gu;

/** A text as it may stand in one line: breaks become blanks; controls and turning marks, which nobody sees, are left out. */
export function toOneLine(typed: string): string {
  return typed.replace(LINE_BREAKS, " ").replace(CONTROLS, "").replace(TURNING, "");
}

/** The same for a text of several lines, which keeps its line breaks. */
export function toLines(typed: string): string {
  return typed.replace(CONTROLS_BUT_LINES, "").replace(TURNING, "");
}

/** How every schema says that a text is too long. */
export const tooLong = (most: number) => `At most ${most} characters.`;

/** A one-line text that must be there: names, places, serial numbers. `missing` says what to enter. */
export const oneLine = (missing: string, most: number) =>
  z.string({ error: missing }).overwrite(toOneLine).trim().min(1, missing).max(most, tooLong(most));

/** A one-line text that may be left empty: captions. */
export const perhapsOneLine = (most: number) =>
  z.string({ error: "Write a text." }).overwrite(toOneLine).trim().max(most, tooLong(most));

/** A text of several lines that must have at least `least` characters. */
export const lines = (missing: string, most: number, least = 1) =>
  z.string({ error: missing }).overwrite(toLines).trim().min(least, missing).max(most, tooLong(most));

/** A text of several lines that may be left empty. */
export const perhapsLines = (most: number) =>
  z.string({ error: "Write a text." }).overwrite(toLines).trim().max(most, tooLong(most));

/** A password that is asked for again in an act; its length is bounded because it is hashed. */
export const passwordAgain = z
  .string({ error: "Type your password: it is asked for in the act." })
  .min(1, "Type your password: it is asked for in the act.")
  .max(200, "Passwords have at most 200 characters.");
