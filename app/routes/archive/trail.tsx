import { CircleCheck, OctagonAlert, ShieldCheck } from "lucide-react";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { EmptyState } from "~/components/ui/empty-state";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { StateBadge } from "~/components/ui/state-badge";
import { Time } from "~/components/ui/time";
import { authoriseUnit } from "~/middleware/authorise.server";
import { standingOf } from "~/services/archive/standing.server";
import { readUnitTrail } from "~/services/audit/read-trail.server";
import { type TrailVerdict, verifyTrail } from "~/services/audit/verify-trail.server";
import { dayIn } from "~/services/context.server";
import { archivedStates } from "~/workflow/states";
import type { Route } from "./+types/trail";
import { actWords } from "./act-words";
import { detailWords } from "./detail-words";

export async function loader({ context, params, url }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "trail.read", params.unit);
  const { db, workshop } = services;
  const [verdict, entries, standing] = await Promise.all([
    // Computing every entry of the workshop again takes its time, so only whoever asks for it waits.
    url.searchParams.get("verify") === "1" ? verifyTrail(db, workshop.id) : null,
    readUnitTrail(services, unit),
    standingOf(db, unit, dayIn(workshop.timeZone, services.now())),
  ]);
  const archived: readonly string[] = archivedStates;
  return {
    unit: {
      number: unit.number,
      name: unit.name,
      state: unit.state,
      standing,
      archived: archived.includes(unit.state),
    },
    verdict,
    entries: entries.map(({ detail, ...entry }) => ({
      ...entry,
      detail: Object.entries(detail).map(detailWords),
    })),
  };
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `Trail of unit ${loaderData.unit.number} · Mainsgate` : "Trail · Mainsgate" },
];

export default function Trail({ loaderData, params }: Route.ComponentProps) {
  const { unit, verdict, entries } = loaderData;
  const base = `/w/${params.workshop}`;
  const home = unit.archived ? `${base}/archive/${unit.number}` : `${base}/units/${unit.number}`;
  return (
    <>
      <Breadcrumbs
        items={[
          unit.archived
            ? { label: "Archive", to: `${base}/archive` }
            : { label: "Units", to: `${base}/units` },
          { label: `Unit ${unit.number}`, to: home },
          { label: "Trail" },
        ]}
      />
      <PageHeader
        kicker={`Unit ${unit.number}`}
        title={
          <>
            Trail of <bdi>{unit.name}</bdi>
          </>
        }
        badges={<StateBadge state={unit.state} standing={unit.standing} />}
        actions={<LinkButton to={home}>{unit.archived ? "The record" : "The unit"}</LinkButton>}
      />
      <div className="space-y-5">
        {verdict ? <Verdict verdict={verdict} /> : <NotVerified />}
        <Sheet
          title="Everything that was done, in order"
          lead="Each entry holds the hash of the entry before it in the workshop’s trail, so none can be altered or left out unnoticed."
          flush
        >
          {entries.length === 0 ? (
            <div className="p-4">
              <EmptyState title="Nothing was done to this unit yet" />
            </div>
          ) : (
            <ol className="divide-y divide-rule">
              {entries.map((entry) => (
                <Entry key={entry.sequence} entry={entry} />
              ))}
            </ol>
          )}
        </Sheet>
      </div>
    </>
  );
}

function NotVerified() {
  return (
    <div
      data-trail="not-verified"
      className="flex flex-wrap items-center gap-3 border border-rule-strong bg-sheet px-4 py-3 print:block"
    >
      <p className="min-w-0 flex-1">
        <span className="font-semibold">Not verified just now. </span>
        The entries below were read, but their hashes were not computed again.
      </p>
      <LinkButton to="?verify=1" icon={ShieldCheck}>
        Verify the whole trail
      </LinkButton>
    </div>
  );
}

function Verdict({ verdict }: { verdict: TrailVerdict }) {
  return verdict.sound ? (
    <div data-trail="sound" className="flex items-start gap-3 border-2 border-pass bg-pass-wash px-4 py-3">
      <CircleCheck aria-hidden size={24} className="shrink-0 text-pass" />
      <p className="min-w-0">
        <span className="font-semibold">The workshop’s trail is whole. </span>
        All {verdict.entries} entries were computed again just now, here on the server; the last hash is{" "}
        <code className="text-sm break-all">{verdict.headHash}</code>. It shows that nothing was altered
        since, as far as this server’s own copy can show it.
      </p>
    </div>
  ) : (
    <div
      data-trail="broken"
      role="alert"
      className="flex items-start gap-3 border-2 border-fail bg-fail-wash px-4 py-3"
    >
      <OctagonAlert aria-hidden size={24} className="shrink-0 text-fail" />
      <p>
        <span className="font-semibold">
          The workshop’s trail does not hold at entry {verdict.brokenAt}.{" "}
        </span>
        {verdict.why} What comes after it proves nothing. Tell the workshop’s steward.
      </p>
    </div>
  );
}

function Entry({ entry }: { entry: Route.ComponentProps["loaderData"]["entries"][number] }) {
  return (
    <li className="grid gap-x-6 gap-y-1 px-4 py-3 md:grid-cols-[11rem_1fr]">
      <div className="text-sm text-ink-soft">
        <Time at={entry.at} />
        <span className="block">Entry {entry.sequence}</span>
      </div>
      <div className="min-w-0">
        <p>
          <span className="font-semibold">{entry.actor ?? "Mainsgate"}</span> {actWords(entry.act)}
        </p>
        {entry.fromState && entry.toState ? (
          <p className="mt-1 flex flex-wrap items-center gap-2">
            <StateBadge state={entry.fromState} />
            <span aria-hidden>→</span>
            <span className="sr-only">to</span>
            <StateBadge state={entry.toState} />
          </p>
        ) : null}
        {entry.detail.length > 0 ? (
          <p className="mt-1 text-sm break-all text-ink-soft">
            {entry.detail.map(({ name, value }) => `${name}: ${value}`).join(" · ")}
          </p>
        ) : null}
        <details className="mt-1 text-sm">
          <summary className="text-link inline-flex min-h-8 items-center pointer-coarse:min-h-11">
            Hashes
          </summary>
          <dl className="break-all">
            <dt className="legend-text">Entry before it</dt>
            <dd>
              <code>{entry.previousHash}</code>
            </dd>
            <dt className="legend-text">This entry</dt>
            <dd>
              <code>{entry.hash}</code>
            </dd>
          </dl>
        </details>
      </div>
    </li>
  );
}
