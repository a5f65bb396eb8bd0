import { and, eq, isNull, sql } from "drizzle-orm";
import { inTransaction, type Reader, tables, type Transaction } from "~/db/client.server";
import { appendEntry } from "~/services/audit/append-entry.server";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError, ForbiddenError, GuardError, NotFoundError } from "~/services/errors";
import { rolesHeld } from "~/services/people/role-holders.server";
import { type Action, decide, type UnitStanding } from "~/workflow/permissions";
import type { Role } from "~/workflow/roles";
import { stateTitles } from "~/workflow/states";
import { type GuardOf, transition, type TransitionName, transitions } from "~/workflow/transitions";

const { benchTurns, formerBuilders, people, units } = tables;

export type UnitRow = typeof units.$inferSelect;

/** A unit as the permission table must see it. */
export type StandingUnit = UnitRow & UnitStanding;

export interface UnitActInput {
  /** The unit's number within the workshop, as in its address. */
  unitNumber: number;
  /** The version that the person's form was made from; left out where any version will do. */
  expectedVersion?: number;
}

export interface Act {
  tx: Transaction;
  /** The unit as it stands under the row lock. */
  unit: StandingUnit;
  at: Date;
  /** What the acting person holds in the workshop at this moment, which may be less than when the request began. */
  roles: readonly Role[];
}

/** Reads a unit of this workshop with everybody who inspected it or built on it before; null when there is none, or it was discarded. */
export async function findUnit(
  tx: Reader,
  workshopId: number,
  unitNumber: number,
  lock: "update" | "none" = "none",
): Promise<StandingUnit | null> {
  const query = tx
    .select()
    .from(units)
    .where(and(eq(units.workshopId, workshopId), eq(units.number, unitNumber), isNull(units.discardedAt)));
  const [unit] = lock === "update" ? await query.for("update") : await query;
  if (!unit) return null;
  const turns = await tx
    .selectDistinct({ inspectorId: benchTurns.inspectorId })
    .from(benchTurns)
    .where(eq(benchTurns.unitId, unit.id));
  const former = await tx
    .select({ personId: formerBuilders.personId })
    .from(formerBuilders)
    .where(eq(formerBuilders.unitId, unit.id));
  return {
    ...unit,
    inspectorIds: turns.map((turn) => turn.inspectorId),
    formerBuilderIds: former.map((row) => row.personId),
  };
}

/**
 * Does something to one unit: locks its row, asks the permission table again under the lock with the roles held at
 * that moment, does the work, raises the version and appends the audit entry, all in one transaction. `act` names the entry where the action's name says
 * too little; null leaves it out, for the saving of a draft while it is typed (its submission pins what counts).
 *
 * @throws NotFoundError, ForbiddenError, ConflictError when the unit changed since the form was made
 */
export function actOnUnit<T>(
  context: ServiceContext,
  action: Action,
  input: UnitActInput,
  work: (act: Act) => Promise<{ result: T; detail?: Record<string, unknown>; act?: string | null }>,
): Promise<T> {
  return inTransaction(context.db, async (tx) => {
    const locked = await lockUnit(context, tx, input);
    const { unit, at } = locked;
    authoriseUnder(context, action, locked);
    const { result, detail, act } = await work(locked);
    await touch(tx, unit, at, {});
    if (act === null) return result;
    await appendEntry(tx, {
      workshopId: context.workshop.id,
      at,
      actorId: context.person.id,
      act: act ?? action,
      unitId: unit.id,
      detail,
    });
    return result;
  });
}

/** What stands against a transition, guard by guard: sentences for the person, none where the guard is met. */
export type GuardAnswers<Name extends TransitionName> = Record<GuardOf<Name>, readonly string[]>;

export interface Move<Name extends TransitionName, T> {
  /** Answers every guard in the transition's row; the compiler demands each. Runs under the row lock. */
  guards: (act: Act) => Promise<GuardAnswers<Name>> | GuardAnswers<Name>;
  /** Writes what the transition brings along, mails included. The unit's state changes after it. */
  work: (act: Act) => Promise<{
    result: T;
    detail?: Record<string, unknown>;
    changes?: Partial<Pick<UnitRow, "inspectorId" | "revision">>;
  }>;
}

/**
 * Takes a unit from one state to the next: everything of {@link actOnUnit}, with the row of the transition table
 * deciding who may, whence, and which guards must hold; one transaction.
 *
 * @throws NotFoundError, ForbiddenError, ConflictError (acted on by somebody else), GuardError with every reason at once
 */
export function moveUnit<Name extends TransitionName, T>(
  context: ServiceContext,
  name: Name,
  input: UnitActInput,
  move: Move<Name, T>,
): Promise<T> {
  return inTransaction(context.db, (tx) => moveUnitWithin(context, tx, name, input, move));
}

/**
 * {@link moveUnit} within the transaction of another unit's move. Whoever locks several units locks the one with the
 * highest id first, so that no two transactions wait for each other.
 */
export async function moveUnitWithin<Name extends TransitionName, T>(
  context: ServiceContext,
  tx: Transaction,
  name: Name,
  input: UnitActInput,
  move: Move<Name, T>,
): Promise<T> {
  const act = await lockUnit(context, tx, input);
  const { unit, at } = act;
  const outcome = transition(unit.state, name);
  if (!outcome.ok) throw await staleConflict(tx, unit);
  authoriseUnder(context, transitions[name].action, act);
  const answers: Record<string, readonly string[]> = await move.guards(act);
  const reasons = Object.values(answers).flat();
  if (reasons.length > 0) throw new GuardError(reasons);
  const { result, detail, changes } = await move.work(act);
  await touch(tx, unit, at, { ...changes, state: outcome.to });
  await appendEntry(tx, {
    workshopId: context.workshop.id,
    at,
    actorId: context.person.id,
    act: `unit.${name}`,
    unitId: unit.id,
    fromState: unit.state,
    toState: outcome.to,
    detail: { revision: unit.revision, ...detail },
  });
  return result;
}

async function lockUnit(context: ServiceContext, tx: Transaction, input: UnitActInput): Promise<Act> {
  const unit = await findUnit(tx, context.workshop.id, input.unitNumber, "update");
  if (!unit) throw new NotFoundError(`Unit ${input.unitNumber}`);
  if (input.expectedVersion !== undefined && input.expectedVersion !== unit.version) {
    throw await staleConflict(tx, unit);
  }
  const roles = await rolesHeld(tx, context.workshop.id, context.person.id);
  return { tx, unit, at: context.now(), roles };
}

function authoriseUnder(context: ServiceContext, action: Action, { unit, roles }: Act): void {
  const decision = decide(action, { id: context.person.id, roles }, unit);
  if (!decision.allowed) throw new ForbiddenError(decision.reason);
}

async function touch(tx: Transaction, unit: UnitRow, at: Date, changes: Partial<UnitRow>): Promise<void> {
  const [answer] = await tx
    .update(units)
    .set({ ...changes, version: sql`${units.version} + 1`, changedAt: at })
    .where(and(eq(units.id, unit.id), eq(units.version, unit.version)));
  if (answer.affectedRows !== 1)
    throw new ConflictError("Somebody else changed this unit at the same moment.");
}

/** Says who acted last, so that the person knows whom to ask. */
async function staleConflict(tx: Transaction, unit: UnitRow): Promise<ConflictError> {
  const { auditEntries } = tables;
  const [last] = await tx
    .select({ name: people.name, at: auditEntries.at })
    .from(auditEntries)
    .leftJoin(people, eq(people.id, auditEntries.actorId))
    .where(eq(auditEntries.unitId, unit.id))
    .orderBy(sql`${auditEntries.sequence} desc`)
    .limit(1);
  const who = last?.name ?? "Somebody else";
  return new ConflictError(
    `${who} acted on unit ${unit.number} before you. It is now “${stateTitles[unit.state]}”, revision ${unit.revision}.`,
  );
}
