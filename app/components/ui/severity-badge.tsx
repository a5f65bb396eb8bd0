/**
 * How bad a finding or a statement of the engine is: shape, word and colour.
 *   <SeverityBadge severity="danger" />
 * "good" is for what the engine has shown to be right; it never stands for something nobody looked at.
 */
import { CircleCheck, CircleHelp, Info, Lightbulb, OctagonAlert, TriangleAlert } from "lucide-react";
import { Badge, type BadgeTone } from "./badge";
import type { IconType } from "./icon-type";

export type Severity = "danger" | "defect" | "advice" | "caution" | "good" | "unknown";

const severities: Record<Severity, { word: string; tone: BadgeTone; icon: IconType }> = {
  danger: { word: "Danger", tone: "danger", icon: OctagonAlert },
  defect: { word: "Defect", tone: "defect", icon: TriangleAlert },
  advice: { word: "Advice", tone: "advice", icon: Lightbulb },
  caution: { word: "Caution", tone: "undecided", icon: Info },
  good: { word: "Good", tone: "pass", icon: CircleCheck },
  unknown: { word: "Unknown", tone: "unknown", icon: CircleHelp },
};

export function SeverityBadge({
  severity,
  size,
  label,
}: {
  severity: Severity;
  size?: "md" | "bench";
  label?: string;
}) {
  const { word, tone, icon } = severities[severity];
  return (
    <Badge tone={tone} icon={icon} size={size}>
      {label ?? word}
    </Badge>
  );
}
