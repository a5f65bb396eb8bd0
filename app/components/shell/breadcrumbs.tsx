/**
 * The way from the top to here; the last one is the page itself and no link.
 *   <Breadcrumbs items={[{ label: "Units", to: "/w/demo/units" }, { label: "U-0007" }]} />
 */
import { Link } from "react-router";

export interface Breadcrumb {
  label: string;
  to?: string;
}

export function Breadcrumbs({ items }: { items: Breadcrumb[] }) {
  if (items.length === 0) return null;
  return (
    <nav aria-label="Breadcrumb" className="mb-3 print:hidden">
      <ol className="flex flex-wrap items-center gap-x-2 text-sm text-ink-soft">
        {items.map((item, index) => {
          const last = index === items.length - 1;
          return (
            <li key={`${index} ${item.label}`} className="flex items-center gap-2">
              {index > 0 ? <span aria-hidden>/</span> : null}
              {item.to && !last ? (
                <Link
                  to={item.to}
                  className="inline-flex min-h-8 items-center hover:text-copper hover:underline pointer-coarse:min-h-11"
                >
                  {item.label}
                </Link>
              ) : (
                <span aria-current={last ? "page" : undefined}>{item.label}</span>
              )}
            </li>
          );
        })}
      </ol>
    </nav>
  );
}
