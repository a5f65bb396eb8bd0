import { PenLine, Search } from "lucide-react";
import { Form, useSearchParams } from "react-router";
import { submissionColumns } from "~/components/submission-columns";
import { Button } from "~/components/ui/button";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Pagination } from "~/components/ui/pagination";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { readPage, readSort } from "~/components/ui/table-params";
import { authorise } from "~/middleware/authorise.server";
import { queueSorts } from "~/services/bench/queue.server";
import { loadSigningQueue, type SigningRow } from "~/services/signing/signing-queue.server";
import { decide } from "~/workflow/permissions";
import type { Route } from "./+types/queue";
import { signingParamsSchema } from "./queue.schema";

const PAGE_SIZE = 25;

export async function loader({ context, url }: Route.LoaderArgs) {
  const services = authorise(context, "signing.queue");
  const params = signingParamsSchema.parse({
    q: url.searchParams.get("q") ?? "",
    battery: url.searchParams.get("battery"),
  });
  const sort = readSort(url.searchParams, queueSorts, { by: "since", direction: "asc" });
  const page = readPage(url.searchParams);
  const queue = await loadSigningQueue(services, {
    text: params.q,
    battery: params.battery,
    sort,
    page,
    pageSize: PAGE_SIZE,
  });
  const { roles, slug } = services.workshop;
  const mayArchive = decide("archive.search", { id: services.person.id, roles }).allowed;
  return { queue, params, sort, page: queue.page, slug, maySign: roles.includes("electrician"), mayArchive };
}

export const meta: Route.MetaFunction = () => [{ title: "Signing · Mainsgate" }];

export default function SigningQueue({ loaderData }: Route.ComponentProps) {
  const { queue, params, sort, page, slug, maySign, mayArchive } = loaderData;
  const filtered = params.q !== "" || params.battery !== "any" || page > 1;
  return (
    <>
      <PageHeader
        title="Signing"
        lead="Units whose sheet is finished and that await an electrician’s decision."
        actions={mayArchive ? <LinkButton to={`/w/${slug}/archive`}>What was decided</LinkButton> : null}
      />
      <Sheet title="Awaiting signature" flush>
        <QueueFilters params={params} />
        <DataTable
          caption="Units that await a signature"
          columns={columnsFor(slug, maySign)}
          rows={queue.rows}
          rowKey={(row) => String(row.number)}
          rowHref={(row) => (maySign ? `/w/${slug}/signing/${row.number}` : `/w/${slug}/units/${row.number}`)}
          sort={sort}
          empty={
            <div className="p-4">
              <EmptyState
                icon={PenLine}
                title={filtered ? "No unit matches" : "Nothing waits for a signature"}
                action={filtered ? <LinkButton to={`/w/${slug}/signing`}>Show all</LinkButton> : null}
              >
                {filtered ? null : "Units appear here when an inspector has finished their sheet."}
              </EmptyState>
            </div>
          }
        />
        <Pagination page={page} pageSize={PAGE_SIZE} total={queue.total} label="Pages of the queue" />
      </Sheet>
    </>
  );
}

function QueueFilters({ params }: { params: Route.ComponentProps["loaderData"]["params"] }) {
  const [search] = useSearchParams();
  return (
    <Form
      method="get"
      role="search"
      // The filters are the address: another address, other initial values.
      key={`${params.q} ${params.battery}`}
      className="flex flex-wrap items-end gap-3 border-b border-rule px-3 py-3 print:hidden"
    >
      <InputField
        field={{ name: "q", initialValue: params.q }}
        label="Search"
        type="search"
        placeholder="Name, builder or number"
        className="grow basis-48"
      />
      <SelectField
        field={{ name: "battery", initialValue: params.battery }}
        label="Battery"
        options={[
          { value: "any", label: "With or without" },
          { value: "yes", label: "With a battery" },
          { value: "no", label: "Without" },
        ]}
      />
      {["sort", "dir"].map((name) => {
        const value = search.get(name);
        return value ? <input key={name} type="hidden" name={name} value={value} /> : null;
      })}
      <Button icon={Search}>Show</Button>
    </Form>
  );
}

function columnsFor(slug: string, maySign: boolean): Column<SigningRow>[] {
  return [
    { id: "name", header: "Unit", cell: (row) => row.name, sortable: true, primary: true },
    { id: "number", header: "No.", cell: (row) => row.number, sortable: true, numeric: true },
    { id: "builder", header: "Builder", cell: (row) => row.builder, sortable: true },
    { id: "inspector", header: "Inspector", cell: (row) => row.inspector ?? "not known" },
    ...submissionColumns,
    {
      id: "review",
      header: "Review",
      hideHeader: true,
      cell: (row) =>
        maySign ? (
          row.objection ? (
            <span className="text-ink-soft">{row.objection}</span>
          ) : (
            <LinkButton to={`/w/${slug}/signing/${row.number}`} icon={PenLine}>
              Review<span className="sr-only"> unit {row.number}</span>
            </LinkButton>
          )
        ) : null,
    },
  ];
}
