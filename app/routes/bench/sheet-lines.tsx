import { Camera, CameraOff } from "lucide-react";
import { Link, useSearchParams } from "react-router";
import { limitSigns } from "~/components/bench-limit";
import { familyTitles } from "~/engine/bench-check";
import { readingText, uncertaintyText } from "~/components/bench-reading";
import { LineVerdictBadge } from "~/components/bench-verdict";
import { SeverityBadge } from "~/components/ui/severity-badge";
import { withParams } from "~/components/ui/table-params";
import { VerdictIcon } from "~/components/ui/verdict-icon";
import type { ObservationView, SheetLine } from "~/services/bench/sheet-view";
import { checkHref } from "./check-href";
import { isShown, type Show, shows, showWords } from "./sheet-filter";

type Line = Omit<SheetLine, "history">;

/**
 * The whole sheet as one dense table, a row group a family; on a phone each row is a card. Every line links to its step.
 *
 * @param base the address of the unit on the bench
 */
export function SheetLines({
  lines,
  show,
  base,
  revision,
}: {
  lines: readonly Line[];
  show: Show;
  base: string;
  revision: number;
}) {
  const shown = lines.filter((line) => isShown(line, show));
  const groups = groupLines(shown);
  return (
    <>
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2 border-b border-rule px-3 py-2 print:hidden">
        <ShowLinks lines={lines} show={show} />
        <nav aria-label="Families" className="flex flex-wrap gap-x-3 text-sm">
          {groups.map(({ id, title }) => (
            <a
              key={id}
              href={`#${id}`}
              className="text-link inline-flex min-h-9 items-center pointer-coarse:min-h-11"
            >
              {title}
            </a>
          ))}
        </nav>
      </div>
      {shown.length === 0 ? (
        <p className="px-4 py-6 text-center text-ink-soft">No check of this kind.</p>
      ) : (
        <table role="table" className="w-full border-collapse text-sm max-md:block">
          <caption className="sr-only">Checks of revision {revision} in working order</caption>
          <thead role="rowgroup" className="max-md:sr-only">
            <tr role="row" className="border-b-2 border-rule-strong bg-inset text-left">
              <th scope="col" role="columnheader" className="px-3 py-2 font-semibold">
                Check
              </th>
              <th scope="col" role="columnheader" className="px-3 py-2 font-semibold">
                Limit
              </th>
              <th scope="col" role="columnheader" className="px-3 py-2 font-semibold">
                Found
              </th>
              <th scope="col" role="columnheader" className="px-3 py-2 font-semibold">
                Instrument
              </th>
              <th scope="col" role="columnheader" className="px-3 py-2 font-semibold">
                Photo
              </th>
              <th scope="col" role="columnheader" className="px-3 py-2 font-semibold">
                Verdict
              </th>
            </tr>
          </thead>
          {groups.map((group) => (
            <GroupRows key={group.id} group={group} base={base} />
          ))}
        </table>
      )}
    </>
  );
}

function ShowLinks({ lines, show }: { lines: readonly Line[]; show: Show }) {
  const [search] = useSearchParams();
  return (
    <nav aria-label="Show" className="flex flex-wrap gap-1 text-sm">
      {shows.map((one) => (
        <Link
          key={one}
          to={withParams(search, { show: one === "all" ? null : one })}
          preventScrollReset
          aria-current={one === show ? "true" : undefined}
          className="inline-flex min-h-9 items-center gap-1.5 rounded-sm border border-transparent px-2.5 hover:bg-inset aria-[current]:border-copper aria-[current]:bg-copper-wash pointer-coarse:min-h-11"
        >
          {showWords[one]}
          <span className="text-ink-soft tabular-nums">
            {lines.filter((line) => isShown(line, one)).length}
          </span>
        </Link>
      ))}
    </nav>
  );
}

interface LineGroup {
  /** Of the heading, for links. */
  id: string;
  title: string;
  lines: Line[];
}

/** The lines by family, in the order in which the bench comes to them: first the dead ones, then those with mains on. */
function groupLines(lines: readonly Line[]): LineGroup[] {
  const groups = new Map<string, LineGroup>();
  for (const line of lines) {
    const { family, energised } = line.check;
    const id = energised ? `family-${family}-mains` : `family-${family}`;
    const title = energised ? `${familyTitles[family]} (mains connected)` : familyTitles[family];
    const group = groups.get(id) ?? { id, title, lines: [] };
    group.lines.push(line);
    groups.set(id, group);
  }
  return [...groups.values()];
}

function GroupRows({ group: { id, title, lines }, base }: { group: LineGroup; base: string }) {
  return (
    <tbody role="rowgroup" className="max-md:block">
      <tr role="row" className="border-y border-rule-strong bg-inset max-md:block">
        <th
          role="rowheader"
          scope="rowgroup"
          colSpan={6}
          id={id}
          className="px-3 py-1.5 text-left text-sm font-semibold max-md:block"
        >
          {title}
        </th>
      </tr>
      {lines.map((line) => (
        <LineRow key={line.check.key} line={line} href={checkHref(base, line.check.key)} />
      ))}
    </tbody>
  );
}

const cell = "px-3 py-2 align-top max-md:col-span-2 max-md:px-0 max-md:py-0.5";
/** On a phone a datum that says nothing takes no line. */
const silent = "max-md:hidden";

function LineRow({ line, href }: { line: Line; href: string }) {
  const { check, observation } = line;
  const open = line.findings.filter((finding) => finding.closing === null);
  const limit = check.asks.kind === "reading" ? check.asks.limit : null;
  return (
    <tr
      role="row"
      className="relative border-b border-rule hover:bg-copper-wash/60 has-focus-visible:bg-copper-wash/60 max-md:grid max-md:grid-cols-[1fr_auto] max-md:gap-x-3 max-md:px-3 max-md:py-2.5"
    >
      <th
        role="rowheader"
        scope="row"
        className={`${cell} text-left font-medium max-md:col-span-1 max-md:col-start-1 max-md:row-start-1 max-md:text-base`}
      >
        <Link
          to={href}
          prefetch="intent"
          className="underline-offset-4 after:absolute after:inset-0 hover:underline"
        >
          {check.title}
        </Link>
        {check.computed?.verdict === "fail" ? (
          <span className="flex items-center gap-1.5 text-sm font-semibold text-fail">
            <VerdictIcon verdict="fail" size={15} className="shrink-0" />
            The map alone fails it
          </span>
        ) : check.computed?.verdict === "unknown" ? (
          <span className="flex items-center gap-1.5 text-sm font-normal text-unknown">
            <VerdictIcon verdict="unknown" size={15} className="shrink-0" />
            The map leaves it unknown
          </span>
        ) : null}
        {open.length > 0 ? (
          <span className="mt-1 flex flex-wrap gap-2">
            {open.map((finding) => (
              <SeverityBadge
                key={finding.id}
                severity={finding.severity}
                label={`Finding ${finding.number}`}
              />
            ))}
          </span>
        ) : null}
      </th>
      <td role="cell" className={`${cell} whitespace-nowrap tabular-nums ${limit ? "" : silent}`}>
        {limit ? limitSigns(limit) : <span className="text-ink-soft">by eye and hand</span>}
      </td>
      <td role="cell" className={`${cell} tabular-nums ${observation ? "" : silent}`}>
        {observation ? <Found line={line} observation={observation} unit={limit?.unit ?? ""} /> : <Nothing />}
      </td>
      <td role="cell" className={`${cell} text-ink-soft ${observation?.instrument ? "" : silent}`}>
        {observation?.instrument ? `${observation.instrument.name}, ${observation.instrument.serial}` : null}
      </td>
      <td
        role="cell"
        className={`${cell} whitespace-nowrap ${line.photoMissing || line.photos.length > 0 ? "" : silent}`}
      >
        <PhotoState line={line} />
      </td>
      <td role="cell" className={`${cell} max-md:col-span-1 max-md:col-start-2 max-md:row-start-1`}>
        <LineVerdictBadge verdict={line.verdict} />
      </td>
    </tr>
  );
}

function Nothing() {
  return (
    <span className="text-ink-soft">
      <span aria-hidden>–</span>
      <span className="sr-only">nothing yet</span>
    </span>
  );
}

function Found({ line, observation, unit }: { line: Line; observation: ObservationView; unit: string }) {
  return (
    <>
      <span className="font-medium">{readingText(observation)}</span>
      {line.judged ? (
        <span className="block text-ink-soft">{uncertaintyText(line.judged.expandedUncertainty, unit)}</span>
      ) : null}
      {observation.carried ? (
        <span className="block text-ink-soft lg:whitespace-nowrap">
          carried over from revision {observation.revision}
        </span>
      ) : null}
      {observation.reason ? <span className="block text-ink-soft">{observation.reason}</span> : null}
    </>
  );
}

function PhotoState({ line }: { line: Line }) {
  if (line.photoMissing) {
    return (
      <span className="inline-flex items-center gap-1.5 font-medium text-undecided">
        <CameraOff aria-hidden size={16} /> missing
      </span>
    );
  }
  if (line.photos.length > 0) {
    return (
      <span className="inline-flex items-center gap-1.5">
        <Camera aria-hidden size={16} /> {line.photos.length}
        <span className="sr-only"> photos</span>
      </span>
    );
  }
  return <span className="text-ink-soft">{line.check.photo === "optional" ? "if useful" : ""}</span>;
}
