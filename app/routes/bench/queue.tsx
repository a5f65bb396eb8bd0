import { parseWithZod } from "@conform-to/zod/v4";
import { ClipboardCheck, HandGrab, Search, Undo2 } from "lucide-react";
import { data, Form, useNavigation, useSearchParams } from "react-router";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { submissionColumns } from "~/components/submission-columns";
import { Button } from "~/components/ui/button";
import { Caution } from "~/components/ui/caution";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Pagination } from "~/components/ui/pagination";
import { Progress } from "~/components/ui/progress";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { readPage, readSort } from "~/components/ui/table-params";
import { answerTo } from "~/middleware/answers.server";
import { authorise, authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { readForm } from "~/middleware/read-form.server";
import { reclaimUnit, releaseUnit, takeUnit } from "~/services/bench/bench-turns.server";
import { listOwnBench, loadQueue, type QueueRow, queueSorts } from "~/services/bench/queue.server";
import { ConflictError, GuardError, ServiceError } from "~/services/errors";
import type { Route } from "./+types/queue";
import { queueParamsSchema, turnSchema } from "./queue.schema";

const PAGE_SIZE = 25;

export async function loader({ context, url }: Route.LoaderArgs) {
  const services = authorise(context, "bench.queue");
  const params = queueParamsSchema.parse({
    state: url.searchParams.get("state"),
    q: url.searchParams.get("q") ?? "",
    battery: url.searchParams.get("battery"),
  });
  const sort = readSort(url.searchParams, queueSorts, { by: "since", direction: "asc" });
  const page = readPage(url.searchParams);
  const [queue, own] = await Promise.all([
    loadQueue(services, {
      state: params.state,
      text: params.q,
      battery: params.battery,
      sort,
      page,
      pageSize: PAGE_SIZE,
    }),
    listOwnBench(services),
  ]);
  const mayTake = services.workshop.roles.includes("inspector");
  return { queue, own, params, sort, page: queue.page, mayTake, slug: services.workshop.slug };
}

/** "take" is weighed by its transition alone, so that the second of two inspectors hears who was first. */
const actionFor = { take: "bench.queue", release: "bench.release", reclaim: "bench.reclaim" } as const;

export async function action({ request, context, params }: Route.ActionArgs) {
  const submission = parseWithZod(await readForm(request), { schema: turnSchema });
  if (submission.status !== "success") {
    return data(
      { conflict: false, message: submission.error?.reason?.[0] ?? "Load the page again and try once more." },
      { status: 400 },
    );
  }
  const { value } = submission;
  const { unit } = value;
  const { services } = await authoriseUnit(context, actionFor[value.act], String(unit));
  const target = { unitNumber: unit, expectedVersion: value.version };
  try {
    switch (value.act) {
      case "take":
        await takeUnit(services, target);
        return await redirectWithFlash(
          `/w/${params.workshop}/bench/${unit}`,
          `Unit ${unit} is on your bench. The builder has been told.`,
        );
      case "release":
        await releaseUnit(services, target);
        return await redirectWithFlash(`/w/${params.workshop}/bench`, `Unit ${unit} is back in the queue.`);
      case "reclaim":
        await reclaimUnit(services, { ...target, reason: value.reason });
        return await redirectWithFlash(
          `/w/${params.workshop}/bench/${unit}`,
          `Unit ${unit} is back in the queue. Its inspector is told, if still in the workshop.`,
        );
    }
  } catch (error) {
    if (!(error instanceof ServiceError)) throw error;
    if (error instanceof ConflictError || error instanceof GuardError) {
      return data({ conflict: true, message: error.message }, { status: 409 });
    }
    throw answerTo(error);
  }
}

export const meta: Route.MetaFunction = () => [{ title: "Bench queue · Mainsgate" }];

export default function BenchQueue({ loaderData, actionData }: Route.ComponentProps) {
  const { queue, own, params, sort, page, slug } = loaderData;
  return (
    <>
      <PageHeader title="Bench" lead="Units that wait for an inspector, and what is on the bench now." />
      {actionData?.message ? (
        <div className="mb-5">
          {actionData.conflict ? (
            <ConflictNotice message={actionData.message} reloadHref={`/w/${slug}/bench`} />
          ) : (
            <Caution title="The form could not be read, and nothing was changed">
              {actionData.message}
            </Caution>
          )}
        </div>
      ) : null}
      {own.length > 0 ? <OwnBench units={own} slug={slug} /> : null}
      <Sheet title="Queue" flush>
        <QueueFilters params={params} />
        <DataTable
          caption="Units of the bench's queue"
          columns={columnsFor(slug, loaderData.mayTake)}
          rows={queue.rows}
          rowKey={(row) => String(row.number)}
          rowHref={(row) => `/w/${slug}/bench/${row.number}`}
          sort={sort}
          empty={
            <div className="p-4">
              <EmptyState
                icon={ClipboardCheck}
                title={
                  params.q !== "" || params.battery !== "any" || page > 1
                    ? "No unit matches"
                    : "Nothing waits here"
                }
                action={
                  <LinkButton to={`/w/${slug}/bench?state=all`}>Show every unit of the bench</LinkButton>
                }
              >
                {params.state === "submitted" ? "Units appear when their builders submit them." : null}
              </EmptyState>
            </div>
          }
        />
        <Pagination page={page} pageSize={PAGE_SIZE} total={queue.total} label="Pages of the queue" />
      </Sheet>
    </>
  );
}

function OwnBench({ units, slug }: { units: Route.ComponentProps["loaderData"]["own"]; slug: string }) {
  return (
    <Sheet title="On your bench" className="mb-5" flush>
      <ul className="divide-y divide-rule">
        {units.map((unit) => (
          <li
            key={unit.number}
            className="grid items-center gap-x-6 gap-y-3 px-4 py-3 sm:grid-cols-[1fr_minmax(12rem,18rem)_auto]"
          >
            <div className="min-w-0">
              <p className="legend-text">
                Unit {unit.number}, revision {unit.revision}
              </p>
              <p className="text-lg font-semibold">{unit.name}</p>
            </div>
            <Progress
              label="Checks decided"
              value={unit.progress.decided}
              max={unit.progress.total}
              detail={`${unit.progress.decided} of ${unit.progress.total}${unit.progress.byVerdict.fail > 0 ? `, ${unit.progress.byVerdict.fail} failed` : ""}`}
            />
            <div className="flex flex-wrap gap-2">
              <LinkButton to={`/w/${slug}/bench/${unit.number}`} variant="primary" icon={ClipboardCheck}>
                Go on
              </LinkButton>
              <ConfirmDialog
                trigger="Put back"
                triggerVariant="secondary"
                triggerIcon={Undo2}
                title={`Put unit ${unit.number} back into the queue?`}
                confirm="Put back"
                confirmVariant="primary"
                fields={{ act: "release", unit: String(unit.number), version: String(unit.version) }}
              >
                <p>What you have recorded stays on its sheet. Any inspector can take the unit next.</p>
              </ConfirmDialog>
            </div>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}

function QueueFilters({ params }: { params: Route.ComponentProps["loaderData"]["params"] }) {
  const [search] = useSearchParams();
  return (
    <Form
      method="get"
      role="search"
      // The filters are the address: another address, other initial values.
      key={`${params.state} ${params.q} ${params.battery}`}
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
        field={{ name: "state", initialValue: params.state }}
        label="State"
        options={[
          { value: "submitted", label: "Waiting for the bench" },
          { value: "on_bench", label: "On the bench" },
          { value: "awaiting_signature", label: "Awaiting signature" },
          { value: "sent_back", label: "Sent back" },
          { value: "all", label: "All of these" },
        ]}
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

function columnsFor(slug: string, mayTake: boolean): Column<QueueRow>[] {
  return [
    { id: "number", header: "No.", cell: (row) => row.number, sortable: true, numeric: true },
    { id: "name", header: "Unit", cell: (row) => row.name, sortable: true, primary: true },
    {
      id: "state",
      header: "State",
      cell: (row) => (
        <>
          <StateBadge state={row.state} />
          {row.state === "on_bench" && row.inspector ? (
            <span className="block text-ink-soft">{row.inspector}</span>
          ) : null}
        </>
      ),
    },
    { id: "builder", header: "Builder", cell: (row) => row.builder, sortable: true },
    ...submissionColumns,
    {
      id: "take",
      header: "Take",
      hideHeader: true,
      cell: (row) => <TakeButton row={row} slug={slug} mayTake={mayTake} />,
    },
  ];
}

function TakeButton({ row, slug, mayTake }: { row: QueueRow; slug: string; mayTake: boolean }) {
  const navigation = useNavigation();
  if (row.state !== "submitted" || !mayTake) return null;
  if (row.isOwn) return <span className="text-ink-soft">You built it</span>;
  const pending = navigation.formData?.get("unit") === String(row.number);
  return (
    <Form method="post" action={`/w/${slug}/bench`}>
      <input type="hidden" name="act" value="take" />
      <input type="hidden" name="unit" value={row.number} />
      <input type="hidden" name="version" value={row.version} />
      <Button variant="primary" icon={HandGrab} pending={pending} pendingLabel="Taking…">
        Take<span className="sr-only"> unit {row.number}</span>
      </Button>
    </Form>
  );
}
