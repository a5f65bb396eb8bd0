import { months } from "~/workflow/day-text";

/**
 * Dates in words. Written out here rather than by the browser's language data, since server and browser may carry
 * different versions of it and the page would then not match its own HTML. Only the time zone arithmetic is Intl's.
 */

export type InstantStyle = "date" | "date-time" | "date-time-seconds";

const formatters = new Map<string, Intl.DateTimeFormat>();

/** A formatter is slow to build and a table holds many dates: one is kept for each zone. */
function formatter(timeZone: string): Intl.DateTimeFormat {
  let found = formatters.get(timeZone);
  if (!found) {
    found = new Intl.DateTimeFormat("en-GB", {
      timeZone,
      hourCycle: "h23",
      year: "numeric",
      month: "numeric",
      day: "numeric",
      hour: "2-digit",
      minute: "2-digit",
      second: "2-digit",
    });
    formatters.set(timeZone, found);
  }
  return found;
}

/**
 * An instant as text in a time zone: "7 Mar 2027", "7 Mar 2027, 09:05" or "7 Mar 2027, 09:05:31".
 * @param timeZone an IANA name, such as "Europe/Berlin"; throws a RangeError for one that is not known
 */
export function instantText(instant: Date, timeZone: string, style: InstantStyle = "date-time"): string {
  const parts = new Map(
    formatter(timeZone)
      .formatToParts(instant)
      .map((part) => [part.type, part.value]),
  );
  const part = (type: Intl.DateTimeFormatPartTypes) => parts.get(type) ?? "";
  const date = `${Number(part("day"))} ${months[Number(part("month")) - 1]} ${part("year")}`;
  if (style === "date") return date;
  const time = `${part("hour")}:${part("minute")}`;
  return style === "date-time" ? `${date}, ${time}` : `${date}, ${time}:${part("second")}`;
}
