import { Plus } from "lucide-react";
import { Badge } from "~/components/ui/badge";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { Day } from "~/components/ui/time";
import { authorise } from "~/middleware/authorise.server";
import { dayIn } from "~/services/context.server";
import { listInstruments } from "~/services/instruments/instruments.server";
import { calibrationState } from "~/workflow/calibration";
import { decide } from "~/workflow/permissions";
import type { Route } from "./+types/instruments";
import { calibrationWords, instrumentKindTitles } from "./instrument-words";

export async function loader({ context, url }: Route.LoaderArgs) {
  const services = authorise(context, "instruments.read");
  const { workshop, person } = services;
  const withRetired = url.searchParams.get("retired") === "yes";
  const today = dayIn(workshop.timeZone, services.now());
  const instruments = await listInstruments(services, { withRetired });
  return {
    slug: workshop.slug,
    withRetired,
    mayManage: decide("instruments.manage", { id: person.id, roles: workshop.roles }).allowed,
    instruments: instruments.map((one) => ({ ...one, state: calibrationState(one, today) })),
  };
}

export const meta: Route.MetaFunction = () => [{ title: "Instruments · Mainsgate" }];

export default function Instruments({ loaderData }: Route.ComponentProps) {
  const { slug, instruments, mayManage, withRetired } = loaderData;
  const add = (
    <LinkButton to={`/w/${slug}/instruments/new`} variant="primary" icon={Plus}>
      Add an instrument
    </LinkButton>
  );
  return (
    <>
      <PageHeader
        title="Instruments"
        lead="What readings are taken with. An instrument out of calibration can’t be chosen on the bench."
        actions={
          <>
            <LinkButton to={withRetired ? "?" : "?retired=yes"}>
              {withRetired ? "Hide retired ones" : "Show retired ones"}
            </LinkButton>
            {mayManage ? add : null}
          </>
        }
      />
      <Sheet flush>
        <DataTable
          caption="Instruments"
          rows={instruments}
          rowKey={(one) => String(one.id)}
          rowHref={(one) => `/w/${slug}/instruments/${one.id}`}
          columns={columns}
          empty={
            <EmptyState title="No instruments yet" action={mayManage ? add : null}>
              Without instruments no reading can be taken.
            </EmptyState>
          }
        />
      </Sheet>
    </>
  );
}

type InstrumentRow = Route.ComponentProps["loaderData"]["instruments"][number];

const columns: Column<InstrumentRow>[] = [
  { id: "name", header: "Name", primary: true, cell: (one) => one.name },
  { id: "kind", header: "Kind", cell: (one) => instrumentKindTitles[one.kind] },
  { id: "serial", header: "Serial number", cell: (one) => one.serial },
  {
    id: "state",
    header: "Calibration",
    cell: (one) => <Badge tone={calibrationWords[one.state].tone}>{calibrationWords[one.state].word}</Badge>,
  },
  { id: "due", header: "Counts until", nowrap: true, cell: (one) => <Day on={one.calibrationDue} /> },
  {
    id: "ranges",
    header: "Ranges",
    cell: (one) =>
      one.ranges.length === 0
        ? "None stated"
        : [...new Set(one.ranges.map((range) => range.unit))].join(", "),
  },
];
