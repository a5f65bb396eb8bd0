/**
 * A word in a small box, for states, counts and kinds. The word says it all; icon and colour only help.
 *   <Badge tone="advice" icon={Clock}>Recheck due</Badge>
 */
import type { ReactNode } from "react";
import type { IconType } from "./icon-type";

export type BadgeTone =
  "idle" | "copper" | "pass" | "fail" | "undecided" | "unknown" | "danger" | "defect" | "advice" | "outline";

export const badgeTones: Record<BadgeTone, string> = {
  idle: "border-idle/40 bg-idle-wash text-idle",
  copper: "border-copper/40 bg-copper-wash text-copper",
  pass: "border-pass/50 bg-pass-wash text-pass",
  fail: "border-fail/50 bg-fail-wash text-fail",
  undecided: "border-undecided/50 bg-undecided-wash text-undecided",
  unknown: "border-dashed border-unknown bg-unknown-wash text-unknown",
  danger: "border-danger bg-danger text-on-danger",
  defect: "border-defect/50 bg-defect-wash text-defect",
  advice: "border-advice/40 bg-advice-wash text-advice",
  outline: "border-rule-strong bg-transparent text-ink",
};

export interface BadgeProps {
  tone?: BadgeTone;
  icon?: IconType;
  size?: "md" | "bench";
  className?: string;
  children: ReactNode;
}

export function Badge({ tone = "idle", icon: Icon, size = "md", className = "", children }: BadgeProps) {
  const box = size === "bench" ? "gap-2 px-3 py-1.5 text-lg" : "gap-1.5 px-2 py-0.5 text-sm";
  return (
    <span
      className={`inline-flex items-center rounded-sm border font-semibold whitespace-nowrap print:border-ink print:bg-transparent print:text-ink ${badgeTones[tone]} ${box} ${className}`}
    >
      {Icon ? <Icon aria-hidden size={size === "bench" ? 22 : 16} className="shrink-0" /> : null}
      {children}
    </span>
  );
}
