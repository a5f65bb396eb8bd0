/** The page that is shown when `page` (from 1) is asked for: one beyond the last is the last. */
export function pageWithin(page: number, total: number, pageSize: number): number {
  return Math.min(page, Math.max(1, Math.ceil(total / pageSize)));
}
