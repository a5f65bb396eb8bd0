import { BatteryMedium } from "lucide-react";
import { Badge } from "~/components/ui/badge";
import type { Column } from "~/components/ui/data-table";
import { Time } from "~/components/ui/time";

interface SubmittedUnit {
  /** When the revision was submitted. */
  since: Date | null;
  revision: number;
  supplyVolts: number;
  supplyHertz: number;
  protectionClass: "I" | "II";
  hasBattery: boolean;
}

/** What every queue tells of a submitted unit, so that those who take from it see the same. */
export const submissionColumns: Column<SubmittedUnit>[] = [
  {
    id: "since",
    header: "Submitted",
    cell: (row) => <Time at={row.since} style="date" />,
    sortable: true,
    nowrap: true,
  },
  { id: "revision", header: "Rev.", cell: (row) => row.revision, sortable: true, numeric: true },
  {
    id: "supply",
    header: "Supply",
    cell: (row) => `${row.supplyVolts} V, ${row.supplyHertz} Hz, class ${row.protectionClass}`,
    sortable: true,
    nowrap: true,
  },
  {
    id: "battery",
    header: "Battery",
    cell: (row) =>
      row.hasBattery ? (
        <Badge tone="outline" icon={BatteryMedium}>
          Battery
        </Badge>
      ) : (
        <span className="text-ink-soft">none</span>
      ),
  },
];
