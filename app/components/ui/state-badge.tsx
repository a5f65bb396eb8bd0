/**
 * Where a unit stands in its life.
 *   <StateBadge state={unit.state} />   <StateBadge state="signed" validity="lapsed" />
 * `validity` is computed from dates; a signed unit that has lapsed is never shown as plainly signed.
 */
import {
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
  Ban,
} from "lucide-react";
import { Badge, type BadgeTone } from "./badge";
import type { IconType } from "./icon-type";

export type UnitStateName =
  | "draft"
  | "submitted"
  | "on_bench"
  | "awaiting_signature"
  | "sent_back"
  | "signed"
  | "refused"
  | "withdrawn"
  | "superseded";

export type Validity = "valid" | "recheck_due" | "lapsed";

const states: Record<UnitStateName, { word: string; tone: BadgeTone; icon: IconType }> = {
  draft: { word: "Draft", tone: "outline", icon: FilePen },
  submitted: { word: "Submitted", tone: "advice", icon: ClipboardList },
  on_bench: { word: "On the bench", tone: "copper", icon: Gauge },
  awaiting_signature: { word: "Awaiting signature", tone: "copper", icon: PenLine },
  sent_back: { word: "Sent back", tone: "defect", icon: Undo2 },
  signed: { word: "Signed", tone: "pass", icon: FileCheck2 },
  refused: { word: "Refused", tone: "fail", icon: FileX2 },
  withdrawn: { word: "Withdrawn", tone: "fail", icon: Ban },
  superseded: { word: "Superseded", tone: "idle", icon: Layers },
};

/** The words for a state, for filters, titles and mail. */
export function stateWord(state: UnitStateName): string {
  return states[state].word;
}

export function StateBadge({
  state,
  validity = "valid",
  size,
}: {
  state: UnitStateName;
  validity?: Validity;
  size?: "md" | "bench";
}) {
  if (state === "signed" && validity === "lapsed") {
    return (
      <Badge tone="fail" icon={CalendarX2} size={size}>
        Lapsed
      </Badge>
    );
  }
  if (state === "signed" && validity === "recheck_due") {
    return (
      <Badge tone="undecided" icon={CalendarClock} size={size}>
        Signed, recheck due
      </Badge>
    );
  }
  const { word, tone, icon } = states[state];
  return (
    <Badge tone={tone} icon={icon} size={size}>
      {word}
    </Badge>
  );
}
