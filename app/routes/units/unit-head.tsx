import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { PageHeader } from "~/components/ui/page-header";
import { StateBadge } from "~/components/ui/state-badge";
import { Tabs } from "~/components/ui/tabs";
import type { UnitState } from "~/workflow/states";

export interface UnitHeadProps {
  slug: string;
  number: number;
  name: string;
  state: UnitState;
  revision: number;
  /** How a signature stands today; null for a unit that isn't signed. */
  standing: React.ComponentProps<typeof StateBadge>["standing"];
  /** Whether the person may edit it now. */
  editable: boolean;
  /** The page's own name in the breadcrumbs; none on the unit's first page. */
  here?: string;
  actions?: React.ReactNode;
}

/** The head of every page of one unit: where it is, what it is called, how it stands. */
export function UnitHead({
  slug,
  number,
  name,
  state,
  standing,
  revision,
  editable,
  here,
  actions,
}: UnitHeadProps) {
  const list = `/w/${slug}/units`;
  const base = `${list}/${number}`;
  return (
    <>
      <Breadcrumbs
        items={[
          { label: "Units", to: list },
          { label: `Unit ${number}`, to: base },
          ...(here ? [{ label: here }] : []),
        ]}
      />
      <PageHeader
        kicker={`Unit ${number} · revision ${revision}`}
        title={name}
        badges={<StateBadge state={state} standing={standing} />}
        actions={actions}
      />
      <Tabs
        label="Unit"
        items={[
          { to: base, label: "Overview", end: true },
          { to: `${base}/map`, label: "Energy map" },
          ...(editable ? [{ to: `${base}/facts`, label: "Facts" }] : []),
          ...(editable && state === "sent_back" ? [{ to: `${base}/rework`, label: "Rework" }] : []),
        ]}
      />
    </>
  );
}
