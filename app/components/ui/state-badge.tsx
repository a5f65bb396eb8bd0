/**
 * Where a unit stands in its life, and for a signed one whether the signature still holds.
 *   <StateBadge state={unit.state} validity={validity(unit.state, recheckOn, today).kind} />
 * Green is shown only for a signature that was computed to be in force: without `validity` a signed unit's badge is
 * neutral, and a lapsed one is never shown as plainly signed.
 */
import {
  Ban,
  CalendarClock,
  CalendarX2,
  ClipboardList,
  FileCheck2,
  FilePen,
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

function lookOf(state: UnitState, validity: Validity["kind"] | undefined): Look {
  if (state === "signed" && validity !== undefined) return signed[validity];
  return { word: stateTitles[state], ...states[state] };
}

export function StateBadge({
  state,
  validity,
  size,
}: {
  state: UnitState;
  validity?: Validity["kind"];
  size?: "md" | "bench";
}) {
  const { word, tone, icon } = lookOf(state, validity);
  return (
    <Badge tone={tone} icon={icon} size={size}>
      {word}
    </Badge>
  );
}
