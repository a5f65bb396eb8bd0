import { and, asc, eq, inArray, isNull } from "drizzle-orm";
import { type Database, isDuplicate, tables, type Transaction } from "~/db/client.server";
import { type InstrumentKind, instrumentKinds } from "~/engine/bench-check";
import type { ServiceContext } from "~/services/context.server";
import { InvalidInputError, NotFoundError } from "~/services/errors";
import { actOnWorkshop } from "~/services/workshop-act.server";

const { instrumentRanges, instruments } = tables;

/** Accuracy ± (percent of the reading + digits × resolution) between `lower` and `upper`, all in `unit`. */
export interface RangeInput {
  unit: string;
  lower: number;
  upper: number;
  percent: number;
  digits: number;
  resolution: number;
}

export interface RangeView extends RangeInput {
  id: number;
}

export interface InstrumentView {
  id: number;
  name: string;
  kind: InstrumentKind;
  serial: string;
  calibratedOn: string;
  calibrationDue: string;
  certificate: string;
  retired: boolean;
  retiredAt: Date | null;
  ranges: RangeView[];
}

export interface CalibrationInput {
  calibratedOn: string;
  calibrationDue: string;
  certificate: string;
}

export interface InstrumentInput extends CalibrationInput {
  name: string;
  kind: InstrumentKind;
  serial: string;
}

type Scope = { db: Pick<Database, "select">; workshop: { id: number } };

/** The workshop's instruments with their ranges, by name. Ask workflow/calibration.ts how they stand on a day. */
export async function listInstruments(
  { db, workshop }: Scope,
  { withRetired = false }: { withRetired?: boolean } = {},
): Promise<InstrumentView[]> {
  const rows = await db
    .select()
    .from(instruments)
    .where(
      and(eq(instruments.workshopId, workshop.id), withRetired ? undefined : isNull(instruments.retiredAt)),
    )
    .orderBy(asc(instruments.name), asc(instruments.serial));
  if (rows.length === 0) return [];
  const ranges = await db
    .select()
    .from(instrumentRanges)
    .where(
      inArray(
        instrumentRanges.instrumentId,
        rows.map((row) => row.id),
      ),
    )
    .orderBy(asc(instrumentRanges.unit), asc(instrumentRanges.upper), asc(instrumentRanges.id));
  return rows.map(({ workshopId: _, ...row }) => ({
    ...row,
    kind: knownKind(row.kind),
    retired: row.retiredAt !== null,
    ranges: ranges
      .filter((range) => range.instrumentId === row.id)
      .map(({ instrumentId: __, ...range }) => range),
  }));
}

/** One instrument of the workshop. @throws NotFoundError */
export async function getInstrument(scope: Scope, instrumentId: number): Promise<InstrumentView> {
  const found = (await listInstruments(scope, { withRetired: true })).find(({ id }) => id === instrumentId);
  if (!found) throw new NotFoundError("The instrument");
  return found;
}

/** @throws InvalidInputError when the serial number is taken */
export function addInstrument(context: ServiceContext, input: InstrumentInput): Promise<number> {
  return actOnWorkshop(context, "instruments.manage", "instrument.add", async ({ tx, workshop }) => {
    try {
      const [row] = await tx
        .insert(instruments)
        .values({ ...input, workshopId: workshop.id })
        .$returningId();
      if (!row) throw new Error("The instrument got no id.");
      return { result: row.id, detail: { instrument: row.id } };
    } catch (error) {
      if (!isDuplicate(error)) throw error;
      throw new InvalidInputError("serial", "An instrument with this serial number is in the list already.");
    }
  });
}

/** Records a new calibration. Readings keep the one under which they were taken. */
export function recalibrate(
  context: ServiceContext,
  instrumentId: number,
  input: CalibrationInput,
): Promise<void> {
  return actOnWorkshop(context, "instruments.manage", "instrument.recalibrate", async ({ tx, workshop }) => {
    const before = await requireInUse(tx, workshop.id, instrumentId);
    await tx.update(instruments).set(input).where(eq(instruments.id, instrumentId));
    return {
      result: undefined,
      detail: {
        instrument: instrumentId,
        before: [before.calibratedOn, before.calibrationDue, before.certificate],
        after: [input.calibratedOn, input.calibrationDue, input.certificate],
      },
    };
  });
}

/** States an accuracy for one more range. */
export function addRange(context: ServiceContext, instrumentId: number, range: RangeInput): Promise<void> {
  return actOnWorkshop(context, "instruments.manage", "instrument.add-range", async ({ tx, workshop }) => {
    await requireInUse(tx, workshop.id, instrumentId);
    await tx.insert(instrumentRanges).values({ ...range, instrumentId });
    return { result: undefined, detail: { instrument: instrumentId, ...range } };
  });
}

/** Takes a range's accuracy away; readings made with it keep theirs. */
export function removeRange(context: ServiceContext, instrumentId: number, rangeId: number): Promise<void> {
  return actOnWorkshop(context, "instruments.manage", "instrument.remove-range", async ({ tx, workshop }) => {
    await requireInUse(tx, workshop.id, instrumentId);
    const [answer] = await tx
      .delete(instrumentRanges)
      .where(and(eq(instrumentRanges.id, rangeId), eq(instrumentRanges.instrumentId, instrumentId)));
    return {
      result: undefined,
      detail: { instrument: instrumentId, range: rangeId },
      unchanged: answer.affectedRows === 0,
    };
  });
}

/** Takes an instrument out of use for good, or back into use. Its readings stay. */
export function setRetired(context: ServiceContext, instrumentId: number, retired: boolean): Promise<void> {
  const act = retired ? "instrument.retire" : "instrument.take-back";
  return actOnWorkshop(context, "instruments.manage", act, async ({ tx, workshop, at }) => {
    const row = await requireRow(tx, workshop.id, instrumentId);
    if ((row.retiredAt !== null) === retired) return { result: undefined, unchanged: true };
    await tx
      .update(instruments)
      .set({ retiredAt: retired ? at : null })
      .where(eq(instruments.id, instrumentId));
    return { result: undefined, detail: { instrument: instrumentId } };
  });
}

async function requireRow(tx: Transaction, workshopId: number, instrumentId: number) {
  const [row] = await tx
    .select()
    .from(instruments)
    .where(and(eq(instruments.id, instrumentId), eq(instruments.workshopId, workshopId)))
    .for("update");
  if (!row) throw new NotFoundError("The instrument");
  return row;
}

async function requireInUse(tx: Transaction, workshopId: number, instrumentId: number) {
  const row = await requireRow(tx, workshopId, instrumentId);
  if (row.retiredAt)
    throw new InvalidInputError("", "This instrument is retired. Take it back into use first.");
  return row;
}

function knownKind(kind: string): InstrumentKind {
  const known = instrumentKinds.find((one) => one === kind);
  if (!known) throw new TypeError(`“${kind}” is no kind of instrument that this version knows.`);
  return known;
}
