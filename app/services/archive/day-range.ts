/** The first moment of a calendar day (YYYY-MM-DD) in a time zone. */
export function startOfDay(timeZone: string, day: string): Date {
  const midnight = Date.parse(`${day}T00:00:00Z`);
  // The zone's offset at the moment itself: a second look corrects the guess where the clock changes that day.
  let moment = midnight;
  for (let look = 0; look < 2; look++) moment = midnight - offsetAt(timeZone, moment);
  return new Date(moment);
}

/** The day after, in the calendar. */
export function nextDay(day: string): string {
  return addDays(day, 1);
}

export function addDays(day: string, days: number): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + days * 86_400_000).toISOString().slice(0, 10);
}

/** How far the zone's clock is ahead of UTC at a moment, in milliseconds. */
function offsetAt(timeZone: string, moment: number): number {
  const parts = new Intl.DateTimeFormat("en-US", {
    timeZone,
    hourCycle: "h23",
    year: "numeric",
    month: "numeric",
    day: "numeric",
    hour: "numeric",
    minute: "numeric",
    second: "numeric",
  }).formatToParts(moment);
  const part = (type: string) => Number(parts.find((each) => each.type === type)?.value);
  const shown = Date.UTC(
    part("year"),
    part("month") - 1,
    part("day"),
    part("hour"),
    part("minute"),
    part("second"),
  );
  return shown - Math.floor(moment / 1000) * 1000;
}
