import { ClipboardCheck, FilePen, Gauge, PenLine, Plus, Undo2 } from "lucide-react";
import { Link, useOutletContext } from "react-router";
import { Badge } from "~/components/ui/badge";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import type { IconType } from "~/components/ui/icon-type";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { Day, Time } from "~/components/ui/time";
import { authorise } from "~/middleware/authorise.server";
import { expiries, type OverviewUnit, recentUnits, unitsInHand } from "~/services/overview.server";
import { type Action, decide } from "~/workflow/permissions";
import type { Role } from "~/workflow/roles";
import type { Route } from "./+types/overview";
import type { WaitingCounts } from "./use-queue-counts";

export async function loader({ context }: Route.LoaderArgs) {
  const services = authorise(context, "workshop.visit");
  const { person, workshop } = services;
  const isSteward = decide("workshop.manage", { id: person.id, roles: workshop.roles }).allowed;
  const [inHand, recent, expiring] = await Promise.all([
    unitsInHand(services),
    recentUnits(services),
    isSteward ? expiries(services) : [],
  ]);
  const { slug, name, roles } = workshop;
  return { person, workshop: { slug, name, roles }, inHand, recent, expiring };
}

export default function Overview({ loaderData }: Route.ComponentProps) {
  const { person, workshop, inHand, recent, expiring } = loaderData;
  const home = `/w/${workshop.slug}`;
  const counts = useOutletContext<WaitingCounts | null>();
  const may = (action: Action) => decide(action, { id: person.id, roles: workshop.roles }).allowed;
  return (
    <>
      <PageHeader
        kicker={workshop.name}
        title="What waits for you"
        actions={
          may("unit.create") ? (
            <LinkButton to={`${home}/units/new`} variant="primary" icon={Plus}>
              New unit
            </LinkButton>
          ) : null
        }
      />
      <WaitingCards home={home} roles={workshop.roles} counts={counts} />
      <div className="grid items-start gap-5 lg:grid-cols-2">
        <Sheet flush title="In your hands" lead="Nobody but you can move these on.">
          <DataTable
            caption="Units in your hands"
            rows={inHand}
            rowKey={(unit) => String(unit.number)}
            rowHref={(unit) => nextStep(home, unit)}
            columns={unitColumns}
            empty={<EmptyState title="Nothing just now" />}
          />
        </Sheet>
        <div className="grid gap-5">
          {expiring.length > 0 ? <Expiring home={home} rows={expiring} /> : null}
          <Sheet flush title="Changed last" lead="In the whole workshop.">
            <DataTable
              caption="Units changed last"
              rows={recent}
              rowKey={(unit) => String(unit.number)}
              rowHref={(unit) => `${home}/units/${unit.number}`}
              columns={unitColumns}
              empty={
                <EmptyState title="No units yet">
                  The first one begins when a builder describes it.
                </EmptyState>
              }
            />
          </Sheet>
        </div>
      </div>
    </>
  );
}

/** Where the person goes on with a unit that is in their hands. */
function nextStep(home: string, unit: OverviewUnit): string {
  switch (unit.state) {
    case "on_bench":
      return `${home}/bench/${unit.number}`;
    case "sent_back":
      return `${home}/units/${unit.number}/rework`;
    default:
      return `${home}/units/${unit.number}`;
  }
}

const unitColumns: Column<OverviewUnit>[] = [
  {
    id: "unit",
    header: "Unit",
    primary: true,
    cell: (unit) => (
      <>
        {unit.number} · <bdi>{unit.name}</bdi>
      </>
    ),
  },
  {
    id: "state",
    header: "State",
    cell: (unit) => <StateBadge state={unit.state} standing={unit.standing} />,
  },
  { id: "changed", header: "Changed", nowrap: true, cell: (unit) => <Time at={unit.changedAt} /> },
];

interface Waiting {
  role: Role;
  count: keyof WaitingCounts;
  path: string;
  label: string;
  icon: IconType;
}

const waiting: Waiting[] = [
  {
    role: "builder",
    count: "sentBack",
    path: "/units?state=sent_back&mine=1",
    label: "Sent back to you",
    icon: Undo2,
  },
  {
    role: "builder",
    count: "drafts",
    path: "/units?state=draft&mine=1",
    label: "Your drafts",
    icon: FilePen,
  },
  { role: "inspector", count: "onBench", path: "/bench", label: "On your bench", icon: Gauge },
  { role: "inspector", count: "toInspect", path: "/bench", label: "To be inspected", icon: ClipboardCheck },
  { role: "electrician", count: "toSign", path: "/signing", label: "Await a signature", icon: PenLine },
];

function WaitingCards({
  home,
  roles,
  counts,
}: {
  home: string;
  roles: readonly Role[];
  counts: WaitingCounts | null;
}) {
  const shown = waiting.filter(({ role }) => roles.includes(role));
  if (shown.length === 0) return null;
  return (
    <ul className="mb-5 grid grid-cols-2 gap-3 sm:grid-cols-3 lg:grid-cols-5">
      {shown.map(({ count, path, label, icon: Icon }) => (
        <li key={count}>
          <Link
            to={home + path}
            className="flex h-full min-h-24 flex-col justify-between border border-rule-strong bg-sheet px-4 py-3 hover:border-copper hover:bg-copper-wash"
          >
            <span className="flex items-center gap-2 text-sm text-ink-soft">
              <Icon aria-hidden size={18} className="shrink-0" />
              {label}
            </span>
            <span className="text-3xl font-bold tabular-nums">
              {counts === null ? <span aria-label="being counted">–</span> : counts[count]}
            </span>
          </Link>
        </li>
      ))}
    </ul>
  );
}

function Expiring({ home, rows }: { home: string; rows: Route.ComponentProps["loaderData"]["expiring"] }) {
  return (
    <Sheet title="Runs out" lead="Licences and calibrations that end soon or are over.">
      <ul className="divide-y divide-rule">
        {rows.map((row) => (
          <li key={`${row.kind} ${row.name} ${row.day}`} className="flex flex-wrap items-center gap-x-3 py-2">
            <Link to={`${home}/${row.kind}s`} className="text-link">
              {row.kind === "licence" ? "Licence of" : "Calibration of"} <bdi>{row.name}</bdi>
            </Link>
            <span className="ml-auto inline-flex items-center gap-2 text-sm">
              <Day on={row.day} />
              <Badge tone={row.over ? "fail" : "undecided"}>{row.over ? "Over" : "Soon"}</Badge>
            </span>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
