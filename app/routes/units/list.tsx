import { Plus, Search, Zap } from "lucide-react";
import { Form } from "react-router";
import { Button } from "~/components/ui/button";
import { CheckboxField } from "~/components/ui/checkbox-field";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Pagination } from "~/components/ui/pagination";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { Time } from "~/components/ui/time";
import { authorise } from "~/middleware/authorise.server";
import { dayIn } from "~/services/context.server";
import { listUnits, type UnitListItem, UNITS_PER_PAGE } from "~/services/units/list-units.server";
import { decide } from "~/workflow/permissions";
import { stateTitles, unitStates } from "~/workflow/states";
import type { Route } from "./+types/list";
import { readUnitQuery } from "./unit-query";

export async function loader({ url, context }: Route.LoaderArgs) {
  const { db, person, workshop, now } = authorise(context, "unit.list");
  const query = readUnitQuery(url.searchParams);
  const { units, total, page } = await listUnits(db, {
    workshopId: workshop.id,
    today: dayIn(workshop.timeZone, now()),
    text: query.text,
    states: query.states,
    builderId: query.mine ? person.id : undefined,
    sort: query.sort,
    page: query.page,
  });
  const mayCreate = decide("unit.create", { id: person.id, roles: workshop.roles }).allowed;
  return { home: `/w/${workshop.slug}/units`, query, units, total, page, perPage: UNITS_PER_PAGE, mayCreate };
}

export const meta: Route.MetaFunction = () => [{ title: "Units · Mainsgate" }];

export default function UnitList({ loaderData }: Route.ComponentProps) {
  const { home, query, units, total, page, perPage, mayCreate } = loaderData;
  const filtered = query.text !== "" || query.states.length > 0 || query.mine;
  const create = mayCreate ? (
    <LinkButton to={`${home}/new`} variant="primary" icon={Plus}>
      New unit
    </LinkButton>
  ) : null;
  return (
    <>
      <PageHeader
        title="Units"
        lead="Everything that was built and described in this workshop."
        actions={create}
      />
      <Filter query={query} mayCreate={mayCreate} home={home} filtered={filtered} />
      <Sheet flush>
        <DataTable
          caption="Units"
          columns={columns}
          rows={units}
          rowKey={(unit) => String(unit.number)}
          rowHref={(unit) => `${home}/${unit.number}`}
          sort={query.sort}
          empty={
            <div className="p-4">
              {filtered ? (
                <EmptyState
                  icon={Search}
                  title="No unit fits this search"
                  action={<LinkButton to={home}>Show all units</LinkButton>}
                />
              ) : (
                <EmptyState icon={Zap} title="No units yet" action={create}>
                  A builder describes a unit here before anybody may plug it in.
                </EmptyState>
              )}
            </div>
          }
        />
        {total > 0 ? <Pagination page={page} pageSize={perPage} total={total} label="Units" /> : null}
      </Sheet>
    </>
  );
}

function Filter({
  query,
  mayCreate,
  home,
  filtered,
}: {
  query: Route.ComponentProps["loaderData"]["query"];
  mayCreate: boolean;
  home: string;
  filtered: boolean;
}) {
  return (
    <Form
      // New values in the address (a link elsewhere, the back button) must show in the inputs.
      key={JSON.stringify([query.text, query.states, query.mine])}
      role="search"
      aria-label="Units"
      className="mb-4 flex flex-wrap items-end gap-3"
    >
      <InputField
        field={{ name: "q", initialValue: query.text }}
        label="Search"
        type="search"
        placeholder="Name, purpose, place or number"
        className="min-w-56 flex-1"
      />
      <SelectField
        field={{ name: "state", initialValue: query.states[0] ?? "" }}
        label="State"
        placeholder="Any state"
        options={unitStates.map((state) => ({ value: state, label: stateTitles[state] }))}
        className="w-48"
      />
      {mayCreate ? (
        <CheckboxField
          field={{ name: "mine", initialValue: query.mine ? "1" : "" }}
          label="Built by me"
          value="1"
        />
      ) : null}
      <input type="hidden" name="sort" value={query.sort.by} />
      <input type="hidden" name="dir" value={query.sort.direction} />
      <Button icon={Search}>Search</Button>
      {filtered ? (
        <LinkButton to={home} variant="quiet">
          Clear
        </LinkButton>
      ) : null}
    </Form>
  );
}

const columns: Column<UnitListItem>[] = [
  { id: "name", header: "Name", cell: (unit) => unit.name, sortable: true, primary: true },
  { id: "number", header: "Number", cell: (unit) => unit.number, sortable: true, numeric: true },
  {
    id: "state",
    header: "State",
    cell: (unit) => <StateBadge state={unit.state} standing={unit.standing} />,
    sortable: true,
  },
  { id: "builder", header: "Built by", cell: (unit) => unit.builder, sortable: true },
  { id: "revision", header: "Revision", cell: (unit) => unit.revision, numeric: true },
  { id: "supply", header: "Supply", cell: (unit) => `${unit.supplyVolts} V, class ${unit.protectionClass}` },
  {
    id: "changed",
    header: "Changed",
    cell: (unit) => <Time at={unit.changedAt} />,
    sortable: true,
    descendingFirst: true,
    nowrap: true,
  },
];
