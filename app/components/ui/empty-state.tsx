/**
 * What to show where a list would be, and what to do next.
 *   <EmptyState title="No units wait for the bench" action={<LinkButton to="/units">All units</LinkButton>}>…</EmptyState>
 */
import type { ReactNode } from "react";
import type { IconType } from "./icon-type";

export interface EmptyStateProps {
  title: string;
  icon?: IconType;
  action?: ReactNode;
  children?: ReactNode;
}

export function EmptyState({ title, icon: Icon, action, children }: EmptyStateProps) {
  return (
    <div className="flex flex-col items-center gap-3 border border-dashed border-rule-strong px-6 py-10 text-center in-[.sheet-frame]:border-0">
      {Icon ? <Icon aria-hidden size={32} className="text-ink-soft" /> : null}
      <p className="text-lg font-semibold">{title}</p>
      {children ? <div className="max-w-prose text-ink-soft">{children}</div> : null}
      {action}
    </div>
  );
}
