/**
 * Facts in the manner of a drawing's corner block: ruled cells, a small legend above each datum.
 *   <TitleBlock items={[{ label: "Number", value: "U-0007" }, { label: "Purpose", value: "…", wide: true }]} />
 * A datum that is not known is shown as "not known", never as an empty cell.
 */
import type { ReactNode } from "react";

export interface TitleBlockItem {
  label: string;
  value: ReactNode;
  /** Takes the whole width. */
  wide?: boolean;
  /** Tabular figures, for numbers and dates that are compared. */
  numeric?: boolean;
}

export function TitleBlock({
  items,
  columns = 4,
  className = "",
}: {
  items: TitleBlockItem[];
  columns?: 2 | 3 | 4;
  className?: string;
}) {
  const grid = { 2: "sm:grid-cols-2", 3: "sm:grid-cols-2 lg:grid-cols-3", 4: "grid-cols-2 lg:grid-cols-4" }[
    columns
  ];
  return (
    // Each cell draws its own right and lower rule; the list draws the outer left and upper one.
    <dl className={`grid border-t border-l border-rule-strong bg-sheet ${grid} ${className}`}>
      {items.map((item) => (
        <div
          key={item.label}
          className={`min-w-0 border-r border-b border-rule-strong px-3 py-2 ${item.wide ? "col-span-full" : ""}`}
        >
          <dt className="legend-text">{item.label}</dt>
          <dd dir="auto" className={`mt-0.5 ${item.numeric ? "tabular-nums" : ""}`}>
            {item.value === null || item.value === undefined || item.value === "" ? (
              <span className="text-ink-soft italic">not known</span>
            ) : (
              item.value
            )}
          </dd>
        </div>
      ))}
    </dl>
  );
}
