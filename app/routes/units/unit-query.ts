import { readPage, readSort } from "~/components/ui/table-params";
import { type UnitSortColumn, unitSortColumns } from "~/services/units/unit-sort";
import { type UnitState, unitStates } from "~/workflow/states";

export interface UnitListState {
  text: string;
  states: UnitState[];
  mine: boolean;
  sort: { by: UnitSortColumn; direction: "asc" | "desc" };
  page: number;
}

/** What the address of a list of units asks for; anything unknown in it is left out. */
export function readUnitQuery(params: URLSearchParams): UnitListState {
  const asked = params.getAll("state");
  return {
    text: (params.get("q") ?? "").slice(0, 100),
    states: unitStates.filter((state) => asked.includes(state)),
    mine: params.get("mine") === "1",
    sort: readSort(params, unitSortColumns, { by: "changed", direction: "desc" }),
    page: readPage(params),
  };
}
