/**
 * A moment, shown in the workshop's time zone.
 *   <TimeZoneProvider timeZone={workshop.timeZone}>…</TimeZoneProvider>      once, in the shell
 *   <Time at={reading.takenAt} />   <Time at={record.signedAt} style="date" />   <Day on="2027-03-07" />
 * Loaders hand over dates as Date or as ISO text in UTC. Outside a provider the zone is UTC and is written out.
 */
import { createContext, use, type ReactNode } from "react";
import { dayText } from "~/workflow/day-text";
import { instantText, type InstantStyle } from "./instant-text";

const TimeZone = createContext<string | null>(null);

export function TimeZoneProvider({ timeZone, children }: { timeZone: string; children: ReactNode }) {
  return <TimeZone value={timeZone}>{children}</TimeZone>;
}

export interface TimeProps {
  /** `null` is "never" or whatever `absent` says. */
  at: Date | string | null | undefined;
  style?: InstantStyle;
  absent?: string;
  timeZone?: string;
  className?: string;
}

export function Time({ at, style = "date-time", absent = "not yet", timeZone, className = "" }: TimeProps) {
  const inherited = use(TimeZone);
  const zone = timeZone ?? inherited ?? "UTC";
  const instant = typeof at === "string" ? new Date(at) : at;
  if (!instant || Number.isNaN(instant.getTime())) return <span className="text-ink-soft">{absent}</span>;
  const named = timeZone === undefined && inherited === null && style !== "date";
  return (
    <time
      dateTime={instant.toISOString()}
      title={`${instantText(instant, zone, "date-time-seconds")} (${zone})`}
      className={`tabular-nums ${className}`}
    >
      {instantText(instant, zone, style)}
      {named ? " UTC" : ""}
    </time>
  );
}

/** A calendar day, which has no time zone: licences, calibrations, recheck dates. */
export function Day({ on, absent = "no date" }: { on: string | null | undefined; absent?: string }) {
  if (!on) return <span className="text-ink-soft">{absent}</span>;
  return (
    <time dateTime={on} className="tabular-nums">
      {dayText(on)}
    </time>
  );
}
