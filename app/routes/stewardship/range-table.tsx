import { Form } from "react-router";
import { Button } from "~/components/ui/button";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { Sheet } from "~/components/ui/sheet";

export interface RangeRow {
  id: number;
  unit: string;
  lower: number;
  upper: number;
  percent: number;
  digits: number;
  resolution: number;
}

/** An instrument's accuracy, range by range, as its data sheet states it. */
export function RangeTable({ ranges, canChange }: { ranges: readonly RangeRow[]; canChange: boolean }) {
  return (
    <Sheet
      flush
      title="Ranges and accuracy"
      lead="From the data sheet. A reading outside every range has no known accuracy and decides nothing."
    >
      <DataTable
        caption="Ranges and accuracy"
        rows={ranges}
        rowKey={(range) => String(range.id)}
        columns={canChange ? [...columns, removal] : columns}
        empty={
          <EmptyState title="No range is stated yet">
            Every reading with it stays undecided until then.
          </EmptyState>
        }
      />
    </Sheet>
  );
}

const columns: Column<RangeRow>[] = [
  { id: "range", header: "Range", primary: true, cell: (range) => rangeText(range) },
  {
    id: "accuracy",
    header: "Accuracy",
    cell: ({ percent, digits }) => `± (${percent} % of the reading + ${digits} digits)`,
  },
  { id: "resolution", header: "One digit is", cell: ({ resolution, unit }) => `${resolution} ${unit}` },
];

const removal: Column<RangeRow> = {
  id: "remove",
  header: "Remove",
  hideHeader: true,
  cell: (range) => (
    <Form method="post">
      <input type="hidden" name="range" value={range.id} />
      <Button name="intent" value="remove-range" variant="quiet">
        Remove<span className="sr-only"> the range {rangeText(range)}</span>
      </Button>
    </Form>
  ),
};

function rangeText({ lower, upper, unit }: RangeRow): string {
  return `${lower} to ${upper} ${unit}`;
}
