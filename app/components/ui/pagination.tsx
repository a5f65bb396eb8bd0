/**
 * Page by page, by links that keep the address's other parameters.
 *   <Pagination page={page} pageSize={50} total={total} label="Records" />
 */
import { ChevronLeft, ChevronRight } from "lucide-react";
import type { ReactNode } from "react";
import { Link, useLocation } from "react-router";
import { buttonClass } from "./button";
import { withParams } from "./table-params";

export interface PaginationProps {
  /** From 1. */
  page: number;
  pageSize: number;
  total: number;
  param?: string;
  label?: string;
}

export function Pagination({ page, pageSize, total, param = "page", label = "Pages" }: PaginationProps) {
  const params = new URLSearchParams(useLocation().search);
  const pages = Math.ceil(total / pageSize);
  // An empty list says so itself.
  if (total === 0) return null;
  const first = (page - 1) * pageSize + 1;
  const last = Math.min(page * pageSize, total);
  const href = (to: number) => withParams(params, { [param]: to === 1 ? null : String(to) });
  return (
    <PageNavigation label={label}>
      <PageLink direction="previous" to={page > 1 ? href(Math.min(page - 1, pages)) : null} />
      <p className="text-sm text-ink-soft tabular-nums">
        {first > total ? `There are ${total} in all` : `${first} to ${last} of ${total}`}
        {pages > 1 ? <span className="max-sm:hidden">{` · page ${page} of ${pages}`}</span> : null}
      </p>
      <PageLink direction="next" to={page < pages ? href(page + 1) : null} />
    </PageNavigation>
  );
}

function PageNavigation({ label, children }: { label: string; children: ReactNode }) {
  return (
    <nav aria-label={label} className="flex items-center justify-between gap-3 px-3 py-2 print:hidden">
      {children}
    </nav>
  );
}

function PageLink({ direction, to }: { direction: "previous" | "next"; to: string | null }) {
  const content =
    direction === "previous" ? (
      <>
        <ChevronLeft aria-hidden size={18} />
        Previous
      </>
    ) : (
      <>
        Next
        <ChevronRight aria-hidden size={18} />
      </>
    );
  // A place-holder instead of a dead link, so that the other one does not jump about.
  if (to === null) {
    return (
      <span aria-hidden className={`${buttonClass("quiet")} invisible`}>
        {content}
      </span>
    );
  }
  return (
    <Link to={to} rel={direction === "previous" ? "prev" : "next"} className={buttonClass("quiet")}>
      {content}
    </Link>
  );
}
