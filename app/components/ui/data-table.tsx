/**
 * A table to compare in: dense, sortable by links that keep the address's other parameters, and on phones and tablets
 * held upright (the "cards" variant of app.css) a stack of cards in which every datum carries its heading.
 *   <DataTable
 *     caption="Units in the queue" rows={units} rowKey={(unit) => unit.id} rowHref={(unit) => `/units/${unit.id}`}
 *     sort={sort}
 *     columns={[
 *       { id: "number", header: "Number", cell: (unit) => unit.number, sortable: true, primary: true },
 *       { id: "power", header: "Power", cell: (unit) => `${unit.power} W`, numeric: true },
 *     ]}
 *     empty={<EmptyState title="The queue is empty" />} />
 * The loader reads the order with readSort (./table-params). With `rowHref`, the primary column's content is the link
 * and the whole row can be tapped; other controls in a row stay usable.
 */
import { ArrowDown, ArrowUp, ChevronsUpDown } from "lucide-react";
import type { ReactNode } from "react";
import { Link, useLocation } from "react-router";
import { sortHref, type Sort } from "./table-params";

export interface Column<Row> {
  id: string;
  header: string;
  cell: (row: Row) => ReactNode;
  sortable?: boolean;
  /** Newest or largest first at the first click. */
  descendingFirst?: boolean;
  /** Right-aligned, tabular figures. */
  numeric?: boolean;
  /** Names the row: a row header, and the head of the card. */
  primary?: boolean;
  /** Keeps the heading for assistive technology only (columns of buttons). */
  hideHeader?: boolean;
  /** No line breaks inside the cell. */
  nowrap?: boolean;
}

export interface DataTableProps<Row> {
  caption: string;
  /** Shows the caption; otherwise it is for assistive technology. */
  showCaption?: boolean;
  columns: Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  rowHref?: (row: Row) => string | null;
  sort?: Sort | null;
  empty?: ReactNode;
}

export function DataTable<Row>({
  caption,
  showCaption = false,
  columns,
  rows,
  rowKey,
  rowHref,
  sort = null,
  empty,
}: DataTableProps<Row>) {
  const params = new URLSearchParams(useLocation().search);
  const sortable = columns.some((column) => column.sortable);
  if (rows.length === 0 && empty) return <>{empty}</>;
  return (
    // Explicit roles: the layout as cards changes `display`, which would take a table's meaning away in some browsers.
    // The box around it scrolls a wide table sideways, and holds what is placed absolutely inside.
    <div className="relative overflow-x-auto">
      <table role="table" className="w-full border-collapse text-sm cards:block">
        <caption className={showCaption ? "px-3 py-2 text-left font-semibold cards:block" : "sr-only"}>
          {caption}
        </caption>
        <thead role="rowgroup" className="cards:block">
          <tr
            role="row"
            className={`border-b-2 border-rule-strong bg-inset text-left cards:flex cards:flex-wrap cards:gap-x-4 cards:px-3 ${sortable ? "cards:border-b" : "cards:border-0"}`}
          >
            {columns.map((column) => {
              const current = sort?.by === column.id ? sort.direction : null;
              return (
                <th
                  key={column.id}
                  role="columnheader"
                  scope="col"
                  aria-sort={current === null ? undefined : current === "asc" ? "ascending" : "descending"}
                  className={
                    `px-2 py-2 align-bottom lg:px-3 font-semibold ${column.numeric ? "text-right" : ""} ` +
                    (column.sortable ? "cards:px-0 cards:py-0" : "cards:sr-only")
                  }
                >
                  {column.sortable ? (
                    <Link
                      to={sortHref(params, column.id, sort, column.descendingFirst)}
                      preventScrollReset
                      className="inline-flex items-center gap-1 underline-offset-4 hover:text-copper hover:underline cards:min-h-11"
                    >
                      <span className={column.hideHeader ? "sr-only" : ""}>{column.header}</span>
                      <SortIcon direction={current} />
                    </Link>
                  ) : (
                    <span className={column.hideHeader ? "sr-only" : ""}>{column.header}</span>
                  )}
                </th>
              );
            })}
          </tr>
        </thead>
        <tbody role="rowgroup" className="cards:block">
          {rows.map((row) => (
            <TableRow key={rowKey(row)} row={row} columns={columns} href={rowHref?.(row) ?? null} />
          ))}
        </tbody>
      </table>
    </div>
  );
}

function TableRow<Row>({ row, columns, href }: { row: Row; columns: Column<Row>[]; href: string | null }) {
  return (
    <tr
      role="row"
      className={
        "border-b border-rule cards:grid cards:gap-x-6 cards:px-3 cards:py-3 sm:grid-cols-2 " +
        (href ? "relative hover:bg-copper-wash/60 has-focus-visible:bg-copper-wash/60" : "")
      }
    >
      {columns.map((column) => {
        const content = column.cell(row);
        const cellClass =
          `px-2 py-2 align-middle lg:px-3 ${column.numeric ? "text-right tabular-nums cards:text-left" : ""} ` +
          `${column.nowrap ? "whitespace-nowrap" : ""} cards:flex cards:gap-3 cards:px-0 cards:py-1`;
        if (column.primary) {
          return (
            <th
              key={column.id}
              role="rowheader"
              scope="row"
              className={`${cellClass} text-left font-semibold cards:col-span-full cards:text-base ${column.numeric || column.nowrap ? "" : "lg:min-w-32"}`}
            >
              {href ? (
                // The stretched pseudo-element makes the whole row a target; the link's name stays short.
                <Link
                  to={href}
                  className="text-ink underline-offset-4 after:absolute after:inset-0 hover:underline"
                >
                  {content}
                </Link>
              ) : (
                content
              )}
            </th>
          );
        }
        return (
          <td key={column.id} role="cell" className={cellClass}>
            {column.hideHeader ? null : (
              <span aria-hidden className="legend-text hidden w-28 shrink-0 pt-0.5 cards:block">
                {column.header}
              </span>
            )}
            {/* Above the stretched link, but only what can be used takes the pointer. */}
            <div
              className={`min-w-0 ${href ? "pointer-events-none relative z-1 [&_:is(a,button,input,select,label,summary)]:pointer-events-auto" : ""}`}
            >
              {content}
            </div>
          </td>
        );
      })}
    </tr>
  );
}

function SortIcon({ direction }: { direction: "asc" | "desc" | null }) {
  if (direction === "asc") return <ArrowUp aria-hidden size={15} className="shrink-0 text-copper" />;
  if (direction === "desc") return <ArrowDown aria-hidden size={15} className="shrink-0 text-copper" />;
  return <ChevronsUpDown aria-hidden size={15} className="shrink-0 text-ink-soft" />;
}
