/**
 * The head of a page: its h1, a line under it, and what can be done here.
 *   <PageHeader title="Bench queue" lead="Units waiting for an inspector" actions={<LinkButton …/>} />
 */
import type { ReactNode } from "react";

export interface PageHeaderProps {
  title: ReactNode;
  /** A short line above the title, such as the unit's number. */
  kicker?: ReactNode;
  lead?: ReactNode;
  /** Badges beside the title. */
  badges?: ReactNode;
  actions?: ReactNode;
}

export function PageHeader({ title, kicker, lead, badges, actions }: PageHeaderProps) {
  return (
    <header className="mb-5 flex flex-wrap items-end justify-between gap-x-6 gap-y-3 border-b border-rule-strong pb-3">
      <div className="min-w-0">
        {kicker ? <p className="legend-text">{kicker}</p> : null}
        <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
          <h1 dir="auto" className="text-2xl sm:text-3xl">
            {title}
          </h1>
          {badges}
        </div>
        {lead ? <p className="mt-1 max-w-prose text-ink-soft">{lead}</p> : null}
      </div>
      {actions ? <div className="flex flex-wrap items-center gap-2 print:hidden">{actions}</div> : null}
    </header>
  );
}
