import { Archive, Search } from "lucide-react";
import { Form, Link, useSearchParams } from "react-router";
import { Button } from "~/components/ui/button";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Pagination } from "~/components/ui/pagination";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { readPage, readSort } from "~/components/ui/table-params";
import { Day, Time } from "~/components/ui/time";
import { authorise } from "~/middleware/authorise.server";
import {
  listArchivePeople,
  type RecordRow,
  recordSorts,
  searchRecords,
} from "~/services/archive/search-records.server";
import type { Route } from "./+types/search";
import { type ArchiveParams, readArchiveParams } from "./search.schema";

const PAGE_SIZE = 25;

export async function loader({ context, url }: Route.LoaderArgs) {
  const services = authorise(context, "archive.search");
  const params = readArchiveParams(url.searchParams);
  const sort = readSort(url.searchParams, recordSorts, { by: "decided", direction: "desc" });
  const page = readPage(url.searchParams);
  const [found, people] = await Promise.all([
    searchRecords(services, {
      text: params.q,
      state: params.state,
      builderId: params.builder,
      signerId: params.signer,
      from: params.from,
      to: params.to,
      sort,
      page,
      pageSize: PAGE_SIZE,
    }),
    listArchivePeople(services),
  ]);
  return { found, people, params, sort, page: found.page, slug: services.workshop.slug };
}

export const meta: Route.MetaFunction = () => [{ title: "Archive · Mainsgate" }];

export default function ArchiveSearch({ loaderData }: Route.ComponentProps) {
  const { found, people, params, sort, page, slug } = loaderData;
  const filtered = Object.values(params).some((value) => value !== null && value !== "") || page > 1;
  return (
    <>
      <PageHeader
        title="Archive"
        lead="Every record that was signed or refused, also those withdrawn or superseded since. Nothing in it is edited."
      />
      <Sheet title="Records" flush>
        <ArchiveFilters params={params} people={people} filtered={filtered} slug={slug} />
        <DataTable
          caption="Records of the archive"
          columns={columns}
          rows={found.rows}
          rowKey={(row) => row.publicCode}
          rowHref={(row) => `/w/${slug}/archive/${row.unitNumber}`}
          sort={sort}
          empty={
            <div className="p-4">
              <EmptyState
                icon={Archive}
                title={filtered ? "No record matches" : "The archive is empty"}
                action={filtered ? <LinkButton to={`/w/${slug}/archive`}>Show all records</LinkButton> : null}
              >
                {filtered ? null : "The first record appears when an electrician signs or refuses a unit."}
              </EmptyState>
            </div>
          }
        />
        <Pagination page={page} pageSize={PAGE_SIZE} total={found.total} label="Pages of the archive" />
      </Sheet>
    </>
  );
}

function ArchiveFilters({
  params,
  people,
  filtered,
  slug,
}: {
  params: ArchiveParams;
  people: Route.ComponentProps["loaderData"]["people"];
  filtered: boolean;
  slug: string;
}) {
  const [search] = useSearchParams();
  const named = (list: readonly { id: number; name: string }[]) => [
    { value: "", label: "Anybody" },
    ...list.map(({ id, name }) => ({ value: String(id), label: name })),
  ];
  return (
    <Form
      method="get"
      role="search"
      // The filters are the address: another address, other initial values.
      key={JSON.stringify(params)}
      className="grid grid-cols-2 items-end gap-3 border-b border-rule px-3 py-3 lg:grid-cols-6 print:hidden"
    >
      <InputField
        field={{ name: "q", initialValue: params.q }}
        label="Search"
        type="search"
        placeholder="Name, person, number or hash"
        className="col-span-2 lg:col-span-3"
      />
      <SelectField
        field={{ name: "state", initialValue: params.state ?? "" }}
        label="State"
        options={[
          { value: "", label: "Any" },
          { value: "signed", label: "Signed" },
          { value: "may-be-used", label: "Signed, in force" },
          { value: "recheck-due", label: "Signed, recheck due" },
          { value: "lapsed", label: "Signed, lapsed" },
          { value: "refused", label: "Refused" },
          { value: "withdrawn", label: "Withdrawn" },
          { value: "superseded", label: "Superseded" },
        ]}
      />
      <SelectField
        field={{ name: "builder", initialValue: String(params.builder ?? "") }}
        label="Built by"
        options={named(people.builders)}
      />
      <SelectField
        field={{ name: "signer", initialValue: String(params.signer ?? "") }}
        label="Decided by"
        options={named(people.signers)}
      />
      <InputField
        field={{ name: "from", initialValue: params.from ?? "" }}
        label="Decided from"
        type="date"
        className="lg:col-span-2"
      />
      <InputField
        field={{ name: "to", initialValue: params.to ?? "" }}
        label="Decided until"
        type="date"
        className="lg:col-span-2"
      />
      {["sort", "dir"].map((name) => {
        const value = search.get(name);
        return value ? <input key={name} type="hidden" name={name} value={value} /> : null;
      })}
      <div className="flex flex-wrap items-center gap-3 lg:col-span-2">
        <Button icon={Search}>Show</Button>
        {filtered ? (
          <Link to={`/w/${slug}/archive`} className="text-link inline-flex min-h-11 items-center text-sm">
            Clear
          </Link>
        ) : null}
      </div>
    </Form>
  );
}

const columns: Column<RecordRow>[] = [
  { id: "name", header: "Unit", cell: (row) => row.unitName, sortable: true, primary: true },
  { id: "number", header: "No.", cell: (row) => row.unitNumber, sortable: true, numeric: true },
  {
    id: "state",
    header: "State",
    cell: (row) => <StateBadge state={row.state} standing={row.standing} />,
  },
  { id: "builder", header: "Built by", cell: (row) => row.builder },
  { id: "signer", header: "Decided by", cell: (row) => row.signer },
  {
    id: "decided",
    header: "Decided",
    cell: (row) => <Time at={row.decidedAt} style="date" />,
    sortable: true,
    descendingFirst: true,
    nowrap: true,
  },
  {
    id: "recheck",
    header: "Recheck by",
    cell: (row) => <Day on={row.recheckOn} absent="none" />,
    sortable: true,
    nowrap: true,
  },
];
