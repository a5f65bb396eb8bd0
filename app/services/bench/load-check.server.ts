import { isDecided } from "~/engine/bench-answer";
import type { InstrumentKind } from "~/engine/bench-check";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { NotFoundError } from "~/services/errors";
import { type InstrumentView, listInstruments } from "~/services/instruments/instruments.server";
import type { UnitRow } from "~/services/unit-act.server";
import { type CalibrationState, calibrationState } from "~/workflow/calibration";
import { beforeMains } from "./before-mains";
import { loadSheet } from "./load-sheet.server";
import type { Sheet, SheetLine } from "./sheet-view";

export interface BenchInstrument extends Pick<
  InstrumentView,
  "id" | "name" | "serial" | "kind" | "calibrationDue" | "ranges"
> {
  calibration: CalibrationState;
}

export interface CheckStep {
  sheet: Sheet;
  line: SheetLine;
  /** From 0. */
  index: number;
  previousKey: string | null;
  nextKey: string | null;
  /** The next one, round the end, that is not decided or lacks its photo; null when this is the last such. */
  nextOpenKey: string | null;
  /** Why mains must not be connected for this step, a sentence each; empty when it may, or when the step needs none. */
  beforeMains: string[];
  /** Of the kind that the check needs, usable ones first. */
  instruments: BenchInstrument[];
}

/**
 * One step of a unit's current sheet, with its neighbours and the instruments that fit.
 *
 * @param key of the check; the first one to be done when it is left out
 * @throws NotFoundError when the sheet has no such check
 */
export async function loadCheck(
  services: Pick<ServiceContext, "db" | "workshop" | "now">,
  unit: UnitRow,
  key: string | null,
): Promise<CheckStep> {
  const sheet = await loadSheet(services, unit);
  const { lines } = sheet;
  const isOpen = (line: SheetLine) => !isDecided(line.verdict) || line.photoMissing;
  const index =
    key === null ? Math.max(0, lines.findIndex(isOpen)) : lines.findIndex((line) => line.check.key === key);
  const line = lines[index];
  if (!line) throw new NotFoundError("This check");
  const nextOpen = [...lines.slice(index + 1), ...lines.slice(0, index)].find(isOpen);
  return {
    sheet,
    line,
    index,
    previousKey: lines[index - 1]?.check.key ?? null,
    nextKey: lines[index + 1]?.check.key ?? null,
    nextOpenKey: nextOpen?.check.key ?? null,
    beforeMains: beforeMains(line.check, lines, sheet.findings),
    instruments:
      line.check.asks.kind === "reading" ? await fitting(services, line.check.asks.instrument.kind) : [],
  };
}

async function fitting(
  services: Pick<ServiceContext, "db" | "workshop" | "now">,
  kind: InstrumentKind,
): Promise<BenchInstrument[]> {
  const today = dayIn(services.workshop.timeZone, services.now());
  const usable = (state: CalibrationState) => state === "in-calibration" || state === "due-soon";
  return (await listInstruments(services))
    .filter((instrument) => instrument.kind === kind)
    .map(({ id, name, serial, kind, calibrationDue, ranges, ...rest }) => ({
      id,
      name,
      serial,
      kind,
      calibrationDue,
      ranges,
      calibration: calibrationState({ ...rest, calibrationDue }, today),
    }))
    .sort((a, b) => Number(usable(b.calibration)) - Number(usable(a.calibration)));
}
