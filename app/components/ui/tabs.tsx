/**
 * Links that look like the tabs of a folder; each leads to a page of its own, so they work without JavaScript.
 *   <Tabs label="Unit" items={[{ to: "/units/7", label: "Facts", end: true }, { to: "/units/7/map", label: "Map", count: 2 }]} />
 */
import { NavLink } from "react-router";

export interface TabItem {
  to: string;
  label: string;
  count?: number;
  /** Current on exactly this address only. */
  end?: boolean;
}

export function Tabs({ label, items }: { label: string; items: TabItem[] }) {
  return (
    <nav aria-label={label} className="mb-5 overflow-x-auto border-b border-rule-strong print:hidden">
      <ul className="flex min-w-max gap-1">
        {items.map((item) => (
          <li key={item.to}>
            <NavLink
              to={item.to}
              end={item.end}
              className={
                "-mb-px inline-flex min-h-11 items-center gap-2 border border-b-0 border-transparent px-4 text-sm font-medium text-ink-soft hover:text-ink " +
                "aria-[current=page]:border-rule-strong aria-[current=page]:bg-sheet aria-[current=page]:text-ink " +
                "aria-[current=page]:shadow-[inset_0_3px_0_var(--color-copper)] focus-visible:-outline-offset-2"
              }
            >
              {item.label}
              {item.count === undefined ? null : (
                <span className="rounded-sm bg-idle-wash px-1.5 text-xs font-semibold text-idle tabular-nums">
                  {item.count}
                </span>
              )}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
