import { and, asc, desc, eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import { accuracyAt, readingObjection } from "~/engine/bench-answer";
import type { BenchCheck } from "~/engine/bench-check";
import { deriveBenchSheet } from "~/engine/bench-sheet";
import { relatedUnits } from "~/engine/scaled-units";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { ConflictError, InvalidInputError, NotFoundError } from "~/services/errors";
import { type Act, actOnUnit } from "~/services/unit-act.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { calibrationState } from "~/workflow/calibration";
import { dayText } from "~/workflow/day-text";
import { beforeMains } from "./before-mains";
import { loadSheet } from "./load-sheet.server";

const { instrumentRanges, instruments, observations, people } = tables;

export type AnswerInput =
  | {
      kind: "measured";
      /** As displayed, without a sign. */
      value: number;
      bound: "over" | "under" | null;
      /** The check's unit or one that differs by its prefix. */
      unit: string;
      instrumentId: number;
      conditions: string;
    }
  | { kind: "examined"; conforms: boolean }
  | { kind: "not-applicable" | "not-possible" };

export interface ObservationInput {
  unitNumber: number;
  checkKey: string;
  /** The observation that the form was made on; null when the check had none. */
  latestId: number | null;
  answer: AnswerInput;
  /** Required for "not applicable", "not possible", every correction, and for mains against `beforeMains`. */
  reason: string | null;
  note: string | null;
}

/**
 * Adds what the inspector found for one check to the sheet. Nothing is overwritten: an answer to a check that has one
 * already is a correction, names the row that it corrects and gives a reason.
 *
 * @returns the new observation's id
 * @throws ForbiddenError unless the person has the unit on the bench, ConflictError when the check was answered
 *   since the form was made, InvalidInputError for an impossible value or an instrument that may not be used
 */
export function recordObservation(context: ServiceContext, input: ObservationInput): Promise<number> {
  return actOnUnit(context, "bench.work", { unitNumber: input.unitNumber }, async (act) => {
    const { tx, unit, at } = act;
    const revision = await loadRevision(tx, unit);
    const check = deriveBenchSheet(revision.map, revision.ruleSet, revision.facts).find(
      (each) => each.key === input.checkKey,
    );
    if (!check) throw new NotFoundError("This check");
    const latest = await findLatest(tx, revision.id, check.key);
    if ((latest?.id ?? null) !== input.latestId) {
      throw new ConflictError(
        latest
          ? `${latest.by} answered this check after you opened it. Look at that answer before you correct it.`
          : "The answer that you saw here is gone from the sheet. Open the check again.",
      );
    }
    const reason = requireReason(
      input,
      latest !== null,
      await objectionsTo(context, act, check, input.answer),
    );
    const [row] = await tx
      .insert(observations)
      .values({
        unitId: unit.id,
        revisionId: revision.id,
        checkKey: check.key,
        kind: input.answer.kind,
        ...(await contentOf(context, act, check, input.answer)),
        reason,
        note: input.note?.trim() ? input.note.trim() : null,
        correctsId: latest?.id ?? null,
        byId: context.person.id,
        at,
      })
      .$returningId();
    if (!row) throw new Error("The observation got no id.");
    return {
      result: row.id,
      act: "bench.observe",
      detail: {
        revision: unit.revision,
        check: check.key,
        observation: row.id,
        kind: input.answer.kind,
        ...(latest ? { corrects: latest.id } : {}),
      },
    };
  });
}

async function findLatest(tx: Transaction, revisionId: number, checkKey: string) {
  const [latest] = await tx
    .select({ id: observations.id, by: people.name })
    .from(observations)
    .innerJoin(people, eq(people.id, observations.byId))
    .where(and(eq(observations.revisionId, revisionId), eq(observations.checkKey, checkKey)))
    .orderBy(desc(observations.id))
    .limit(1);
  return latest ?? null;
}

/** What should have kept mains off while this was found out; a step that was not done needed no mains. */
async function objectionsTo(
  context: ServiceContext,
  { tx, unit }: Act,
  check: BenchCheck,
  answer: AnswerInput,
) {
  if (!check.energised || answer.kind === "not-applicable" || answer.kind === "not-possible") return [];
  const { lines, findings } = await loadSheet(context, unit, undefined, tx);
  return beforeMains(check, lines, findings);
}

function requireReason(
  { answer, reason }: ObservationInput,
  isCorrection: boolean,
  objections: readonly string[],
): string | null {
  const given = reason?.trim() ?? "";
  if (given !== "") return given;
  if (answer.kind === "not-applicable") {
    throw new InvalidInputError("reason", "Say why this check doesn't apply to the unit.");
  }
  if (answer.kind === "not-possible") {
    throw new InvalidInputError("reason", "Say why this check can't be done.");
  }
  if (objections.length > 0) {
    throw new InvalidInputError(
      "reason",
      `Do not connect mains: ${objections.join(" ")} If it was right all the same, say why.`,
    );
  }
  if (isCorrection) {
    throw new InvalidInputError("reason", "Say why the earlier answer is being corrected; it stays visible.");
  }
  return null;
}

async function contentOf(context: ServiceContext, act: Act, check: BenchCheck, answer: AnswerInput) {
  if (answer.kind === "measured") return measured(context, act, check, answer);
  if (answer.kind === "examined") {
    if (check.asks.kind !== "examination") {
      throw new InvalidInputError("value", "This check asks for a reading, not for an examination.");
    }
    return { conforms: answer.conforms ? ("yes" as const) : ("no" as const) };
  }
  return {};
}

async function measured(
  context: ServiceContext,
  { tx, at }: Act,
  { asks }: BenchCheck,
  { value, bound, unit, instrumentId, conditions }: Extract<AnswerInput, { kind: "measured" }>,
) {
  if (asks.kind !== "reading") {
    throw new InvalidInputError("conforms", "This check asks for an examination, not for a reading.");
  }
  if (!relatedUnits(asks.unit).includes(unit)) {
    throw new InvalidInputError("unit", `This check is read in ${asks.unit}.`);
  }
  const objection = readingObjection(value, unit);
  if (objection) throw new InvalidInputError("value", objection);
  const instrument = await requireInstrument(context, tx, instrumentId, at);
  if (instrument.kind !== asks.instrument.kind) {
    throw new InvalidInputError(
      "instrumentId",
      `${instrument.name} is not the kind of instrument that this check needs.`,
    );
  }
  const ranges = await tx
    .select()
    .from(instrumentRanges)
    .where(eq(instrumentRanges.instrumentId, instrument.id))
    .orderBy(asc(instrumentRanges.id));
  return {
    value,
    bound,
    unit,
    instrumentId: instrument.id,
    accuracy: accuracyAt(ranges, value, unit),
    calibrationDue: instrument.calibrationDue,
    conditions: conditions.trim(),
  };
}

/** An instrument of the workshop that may be used today: neither retired nor out of calibration. */
async function requireInstrument(context: ServiceContext, tx: Transaction, id: number, at: Date) {
  const [instrument] = await tx
    .select()
    .from(instruments)
    .where(and(eq(instruments.id, id), eq(instruments.workshopId, context.workshop.id)));
  if (!instrument) throw new InvalidInputError("instrumentId", "Choose one of the workshop's instruments.");
  const named = `${instrument.name} (serial ${instrument.serial})`;
  const { calibratedOn, calibrationDue } = instrument;
  const today = dayIn(context.workshop.timeZone, at);
  switch (calibrationState({ calibratedOn, calibrationDue, retired: instrument.retiredAt !== null }, today)) {
    case "retired":
      throw new InvalidInputError("instrumentId", `${named} has been retired. Take another instrument.`);
    case "overdue":
      throw new InvalidInputError(
        "instrumentId",
        `${named} is out of calibration since ${dayText(calibrationDue)}. A reading with it proves nothing; take another instrument.`,
      );
    case "not-yet":
      throw new InvalidInputError(
        "instrumentId",
        `${named} has its calibration dated ${dayText(calibratedOn)}, which is still to come.`,
      );
    case "in-calibration":
    case "due-soon":
      return instrument;
  }
}
