/**
 * Where a unit stands in its life, and for a signed one whether the signature still holds.
 *   <StateBadge state={unit.state} standing={{ validity: validity(unit.state, recheckOn, today).kind, departures }} />
 * Green is shown only for a signature that was computed to be in force and that no failing check stands against:
 * without `standing` a signed unit's badge is neutral (for what once was: the trail), a lapsed one is never shown as
 * plainly signed, and one with departures says so.
 */
import {
  Ban,
  CalendarClock,
  CalendarX2,
  ClipboardList,
  FileCheck2,
  FilePen,
  FileWarning,
  FileX2,
  Gauge,
  Layers,
  PenLine,
  Undo2,
} from "lucide-react";
import { stateTitles, type UnitState, type Validity } from "~/workflow/states";
import { Badge, type BadgeTone } from "./badge";
import type { IconType } from "./icon-type";

interface Look {
  word: string;
  tone: BadgeTone;
  icon: IconType;
}

const states: Record<UnitState, Omit<Look, "word">> = {
  draft: { tone: "outline", icon: FilePen },
  submitted: { tone: "advice", icon: ClipboardList },
  on_bench: { tone: "copper", icon: Gauge },
  awaiting_signature: { tone: "copper", icon: PenLine },
  sent_back: { tone: "defect", icon: Undo2 },
  signed: { tone: "outline", icon: FileCheck2 },
  refused: { tone: "fail", icon: FileX2 },
  withdrawn: { tone: "fail", icon: Ban },
  superseded: { tone: "idle", icon: Layers },
};

const signed: Record<Validity["kind"], Look> = {
  "may-be-used": { word: "Signed", tone: "pass", icon: FileCheck2 },
  "recheck-due": { word: "Signed, recheck due", tone: "undecided", icon: CalendarClock },
  lapsed: { word: "Lapsed", tone: "fail", icon: CalendarX2 },
  "must-not-be-used": { word: "Signed, not in force", tone: "fail", icon: CalendarX2 },
};

/** Signed although a check fails: the conditions must be read. */
const signedWithDepartures: Record<Validity["kind"], Look> = {
  ...signed,
  "may-be-used": { word: "Signed, with departures", tone: "undecided", icon: FileWarning },
  "recheck-due": { word: "Signed, with departures, recheck due", tone: "undecided", icon: CalendarClock },
};

interface Standing {
  validity: Validity["kind"];
  departures: boolean;
}

function lookOf(state: UnitState, standing: Standing | null): Look {
  if (state === "signed" && standing) {
    return (standing.departures ? signedWithDepartures : signed)[standing.validity];
  }
  return { word: stateTitles[state], ...states[state] };
}

export function StateBadge({
  state,
  standing = null,
  size,
}: {
  state: UnitState;
  standing?: Standing | null;
  size?: "md" | "bench";
}) {
  const { word, tone, icon } = lookOf(state, standing);
  return (
    <Badge tone={tone} icon={icon} size={size}>
      {word}
    </Badge>
  );
}
