/** Small rules that the signing page and the service share: pure, the same in the browser and on the server. */

/** The statement that a signature makes unless the signer words it otherwise. */
export const usualStatement =
  "I have reviewed the energy map, the bench sheet with its readings, the findings and the photos of this revision. On this evidence the unit may be plugged in and used under the conditions stated here, until the recheck date.";

/** Adds whole months to a day (YYYY-MM-DD); a day that the month lacks becomes its last one. */
export function addMonths(day: string, months: number): string {
  const [year = 0, month = 1, date = 1] = day.split("-").map(Number);
  const first = new Date(Date.UTC(year, month - 1 + months, 1));
  const lastOfMonth = new Date(Date.UTC(first.getUTCFullYear(), first.getUTCMonth() + 1, 0)).getUTCDate();
  first.setUTCDate(Math.min(date, lastOfMonth));
  return first.toISOString().slice(0, 10);
}

/** The latest day that a recheck may be set to. */
export function lastRecheckDay(today: string): string {
  return addMonths(today, 60);
}

/** Whether a typed name is the person's: letter case, accents' encoding and doubled blanks don't matter. */
export function nameMatches(typed: string, name: string): boolean {
  return plain(typed) === plain(name);
}

function plain(text: string): string {
  return text.normalize("NFC").trim().replace(/\s+/g, " ").toLocaleLowerCase("en");
}
