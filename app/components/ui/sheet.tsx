/**
 * A sheet of paper with a drawing-sheet border: the box that most content stands in.
 *   <Sheet title="Energy map" actions={<LinkButton …/>}>…</Sheet>
 * `flush` leaves out the padding, for tables and drawings that run to the border. `plain` has one thin line only.
 */
import { useId, type ReactNode } from "react";

export interface SheetProps {
  title?: ReactNode;
  /** h2 unless told. */
  headingLevel?: 1 | 2 | 3 | 4;
  lead?: ReactNode;
  actions?: ReactNode;
  /** Under the content, behind a rule: buttons of a form, a total. */
  footer?: ReactNode;
  flush?: boolean;
  plain?: boolean;
  id?: string;
  className?: string;
  children: ReactNode;
}

export function Sheet({
  title,
  headingLevel = 2,
  lead,
  actions,
  footer,
  flush = false,
  plain = false,
  id,
  className = "",
  children,
}: SheetProps) {
  const headingId = useId();
  const Heading = `h${headingLevel}` as const;
  return (
    <section
      id={id}
      aria-labelledby={title ? headingId : undefined}
      className={`min-w-0 bg-sheet p-[5px] ${plain ? "border border-rule" : "sheet-frame"} ${className}`}
    >
      {title || actions ? (
        <div className="flex flex-wrap items-start justify-between gap-x-4 gap-y-2 border-b border-rule px-4 py-3">
          <div className="min-w-0">
            {title ? (
              <Heading id={headingId} className={headingLevel === 1 ? "text-2xl" : "text-lg"}>
                {title}
              </Heading>
            ) : null}
            {lead ? <p className="max-w-prose text-sm text-ink-soft">{lead}</p> : null}
          </div>
          {actions ? <div className="flex flex-wrap items-center gap-2 print:hidden">{actions}</div> : null}
        </div>
      ) : null}
      <div className={flush ? "" : "px-4 py-4"}>{children}</div>
      {footer ? <div className="border-t border-rule px-4 py-3">{footer}</div> : null}
    </section>
  );
}
