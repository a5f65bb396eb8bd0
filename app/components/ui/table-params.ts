/**
 * A table's order and page live in the address, so that a view can be shared and the back button works.
 * Loaders read them with readSort and readPage; headers and pagination write them with sortHref and withParams.
 */

export interface Sort<Column extends string = string> {
  by: Column;
  direction: "asc" | "desc";
}

/** The address with some parameters set (or removed, by null) and all others kept. Always starts with "?". */
export function withParams(params: URLSearchParams, changes: Record<string, string | null>): string {
  const next = new URLSearchParams(params);
  for (const [name, value] of Object.entries(changes)) {
    if (value === null) next.delete(name);
    else next.set(name, value);
  }
  // React Router's own parameter for index routes is no part of a shared address.
  next.delete("index");
  return `?${next.toString()}`;
}

/**
 * Where a column's header leads: ascending first, then the other way round. The page is dropped, since another order
 * has other pages.
 */
export function sortHref(
  params: URLSearchParams,
  column: string,
  current: Sort | null,
  descendingFirst = false,
): string {
  const first = descendingFirst ? "desc" : "asc";
  const other = descendingFirst ? "asc" : "desc";
  const direction = current?.by === column && current.direction === first ? other : first;
  return withParams(params, { sort: column, dir: direction, page: null, after: null, before: null });
}

/** The order asked for in the address, if it names one of the allowed columns; otherwise the fallback. */
export function readSort<Column extends string>(
  params: URLSearchParams,
  allowed: readonly Column[],
  fallback: Sort<Column>,
): Sort<Column> {
  const asked = params.get("sort");
  const by = allowed.find((column) => column === asked);
  if (by === undefined) return fallback;
  return { by, direction: params.get("dir") === "desc" ? "desc" : "asc" };
}

/** The page asked for, from 1; anything that is no sensible number is the first page. */
export function readPage(params: URLSearchParams, name = "page"): number {
  const text = params.get(name) ?? "";
  const page = /^\d{1,6}$/.test(text) ? Number(text) : 1;
  return Math.max(1, page);
}
