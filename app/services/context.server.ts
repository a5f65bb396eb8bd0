import type { CurrentWorkshop, SignedInPerson } from "~/context";
import type { Database } from "~/db/client.server";

/** What every service of a workshop is given first: where it works, for whom, and what the time is. */
export interface ServiceContext {
  db: Database;
  person: SignedInPerson;
  workshop: CurrentWorkshop;
  /** Absolute base of links in mails and QR codes, without a slash at the end. */
  appUrl: string;
  now: () => Date;
}

/** The calendar day of a moment in the workshop's time zone, as YYYY-MM-DD. */
export function dayIn(timeZone: string, moment: Date): string {
  return new Intl.DateTimeFormat("en-CA", { timeZone, dateStyle: "short" }).format(moment);
}
