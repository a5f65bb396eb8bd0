export const unitSortColumns = ["number", "name", "state", "builder", "changed"] as const;
export type UnitSortColumn = (typeof unitSortColumns)[number];
