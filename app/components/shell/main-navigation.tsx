/** The main navigation: a row under the header on wide screens, a bar at the thumb on phones. */
import { Ellipsis } from "lucide-react";
import { NavLink } from "react-router";
import type { NavigationItem } from "./navigation-item";
import { menuLine, PopoverMenu } from "./popover-menu";

const IN_BAR = 4;

export function NavigationRow({ items }: { items: NavigationItem[] }) {
  return (
    <nav aria-label="Main" className="overflow-x-auto border-t border-rule max-sm:hidden print:hidden">
      <ul className="mx-auto flex max-w-7xl min-w-max gap-1 px-3">
        {items.map((item) => (
          <li key={item.to}>
            <NavLink
              to={item.to}
              end={item.end}
              className={
                "inline-flex min-h-11 items-center gap-2 px-3 text-sm font-medium text-ink-soft hover:text-ink " +
                "aria-[current=page]:text-ink aria-[current=page]:shadow-[inset_0_-3px_0_var(--color-copper)] focus-visible:-outline-offset-2"
              }
            >
              <item.icon aria-hidden size={17} className="shrink-0 max-lg:hidden" />
              {item.label}
              <Count of={item.count} />
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}

export function NavigationBar({ items }: { items: NavigationItem[] }) {
  const all = items.length <= IN_BAR + 1;
  const inBar = all ? items : items.slice(0, IN_BAR);
  const behind = all ? [] : items.slice(IN_BAR);
  const cell =
    "relative flex h-full min-h-14 w-full flex-col items-center justify-center gap-0.5 px-1 text-xs font-medium text-ink-soft " +
    "aria-[current=page]:text-copper aria-[current=page]:shadow-[inset_0_3px_0_var(--color-copper)] focus-visible:-outline-offset-2";
  return (
    <nav
      aria-label="Main"
      className="fixed inset-x-0 bottom-0 z-30 border-t border-rule-strong bg-sheet pb-[env(safe-area-inset-bottom)] sm:hidden print:hidden"
    >
      <ul className="grid auto-cols-fr grid-flow-col">
        {inBar.map((item) => (
          <li key={item.to}>
            <NavLink to={item.to} end={item.end} className={cell}>
              <item.icon aria-hidden size={22} />
              <span className="max-w-full truncate">{item.short ?? item.label}</span>
              <span className="absolute top-1 left-1/2 ml-2">
                <Count of={item.count} />
              </span>
            </NavLink>
          </li>
        ))}
        {behind.length > 0 ? (
          <li>
            <PopoverMenu
              place="bottom"
              triggerClass={cell}
              trigger={
                <>
                  <Ellipsis aria-hidden size={22} />
                  More
                </>
              }
            >
              <ul>
                {behind.map((item) => (
                  <li key={item.to}>
                    <NavLink to={item.to} end={item.end} className={`${menuLine} min-h-14 text-base`}>
                      <item.icon aria-hidden size={22} />
                      {item.label}
                      <Count of={item.count} />
                    </NavLink>
                  </li>
                ))}
              </ul>
            </PopoverMenu>
          </li>
        ) : null}
      </ul>
    </nav>
  );
}

function Count({ of }: { of: number | undefined }) {
  if (!of) return null;
  return (
    <span className="inline-flex rounded-sm bg-copper px-1.5 whitespace-nowrap text-xs font-semibold text-on-copper tabular-nums">
      {of > 99 ? "99+" : of}
      <span className="sr-only"> waiting</span>
    </span>
  );
}
