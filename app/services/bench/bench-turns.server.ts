import { and, eq, isNull } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { tellHandOver, unitTitle } from "~/services/mail/hand-over.server";
import { type Act, moveUnit, type UnitActInput } from "~/services/unit-act.server";
import { loadRevision } from "~/services/units/load-revision.server";

const { benchTurns, people } = tables;

/**
 * Takes a submitted unit on the bench. Of two inspectors at the same moment the row lock lets one through; the other
 * is told who was first.
 *
 * @throws ForbiddenError when the person built it, ConflictError when it is no longer in the queue
 */
export function takeUnit(context: ServiceContext, input: UnitActInput): Promise<void> {
  return moveUnit(context, "take", input, {
    guards: async ({ tx, unit }) => {
      const open = await tx
        .select({ name: people.name })
        .from(benchTurns)
        .innerJoin(people, eq(people.id, benchTurns.inspectorId))
        .where(and(eq(benchTurns.unitId, unit.id), isNull(benchTurns.endedAt)));
      return { "nobody-else-on-it": open.map(({ name }) => `${name} still has this unit on the bench.`) };
    },
    work: async (act) => {
      const { tx, unit, at } = act;
      const revision = await loadRevision(tx, unit);
      await tx.insert(benchTurns).values({
        unitId: unit.id,
        revisionId: revision.id,
        inspectorId: context.person.id,
        takenAt: at,
      });
      await tellHandOver(context, act, "take", () => ({
        subject: `${unitTitle(unit)} is on the bench`,
        paragraphs: [
          `${context.person.name} took ${unitTitle(unit)}, revision ${unit.revision}, on the bench.`,
          "You will hear when the sheet is finished, or when the unit comes back to you with findings.",
        ],
        link: { label: "See the unit", path: `/units/${unit.number}` },
      }));
      return { result: undefined, changes: { inspectorId: context.person.id } };
    },
  });
}

/** Puts a unit back into the queue. What was observed stays on the sheet for whoever takes it next. */
export function releaseUnit(context: ServiceContext, input: UnitActInput): Promise<void> {
  return moveUnit(context, "release", input, {
    guards: () => ({}),
    work: async (act) => {
      await endTurn(act);
      return { result: undefined, changes: { inspectorId: null } };
    },
  });
}

/**
 * Puts a unit back into the queue for an inspector who is absent: as {@link releaseUnit}, with the reason kept beside
 * the turn that it ends. The inspector is told.
 *
 * @throws GuardError without a reason, ForbiddenError, ConflictError when it has left the bench meanwhile
 */
export function reclaimUnit(
  context: ServiceContext,
  input: UnitActInput & { reason: string },
): Promise<void> {
  const reason = input.reason.trim();
  return moveUnit(context, "reclaim", input, {
    guards: () => ({
      "reason-given": reason === "" ? ["Say why: its inspector must know."] : [],
    }),
    work: async (act) => {
      const { unit } = act;
      await endTurn(act, { reclaimedById: context.person.id, reclaimReason: reason });
      await tellHandOver(context, act, "reclaim", () => ({
        subject: `${unitTitle(unit)} was put back into the queue`,
        paragraphs: [
          `${context.person.name} put ${unitTitle(unit)} back into the queue for you. It is no longer on your bench; another inspector may take it.`,
          `The reason: ${reason}`,
          "What you recorded stays on its sheet. If the unit still lies open on your bench, make it safe.",
        ],
        link: { label: "See the sheet", path: `/bench/${unit.number}` },
      }));
      return { result: undefined, detail: { inspector: unit.inspectorId }, changes: { inspectorId: null } };
    },
  });
}

/** Ends the open turn of a unit that leaves the bench. */
export async function endTurn(
  { tx, unit, at }: Act,
  reclaimed: { reclaimedById?: number; reclaimReason?: string } = {},
): Promise<void> {
  await tx
    .update(benchTurns)
    .set({ endedAt: at, ...reclaimed })
    .where(and(eq(benchTurns.unitId, unit.id), isNull(benchTurns.endedAt)));
}
