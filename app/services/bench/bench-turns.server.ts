import { and, eq, isNull } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { enqueueMails } from "~/services/mail/enqueue-mail.server";
import { type Act, moveUnit, type UnitActInput } from "~/services/unit-act.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { findPerson, mailFrom, unitTitle } from "./hand-over.server";

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
    work: async ({ tx, unit, at }) => {
      const revision = await loadRevision(tx, unit);
      await tx.insert(benchTurns).values({
        unitId: unit.id,
        revisionId: revision.id,
        inspectorId: context.person.id,
        takenAt: at,
      });
      const builder = await findPerson(tx, unit.builderId);
      await enqueueMails(tx, [
        {
          workshopId: context.workshop.id,
          recipient: builder.email,
          toName: builder.name,
          subject: `${unitTitle(unit)} is on the bench`,
          paragraphs: [
            `${context.person.name} took ${unitTitle(unit)}, revision ${unit.revision}, on the bench.`,
            "You will hear when the sheet is finished, or when the unit comes back to you with findings.",
          ],
          link: {
            label: "See the unit",
            href: `${context.appUrl}/w/${context.workshop.slug}/units/${unit.number}`,
          },
          from: mailFrom(context),
          at,
        },
      ]);
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

/** Ends the open turn of a unit that leaves the bench. */
export async function endTurn({ tx, unit, at }: Act): Promise<void> {
  await tx
    .update(benchTurns)
    .set({ endedAt: at })
    .where(and(eq(benchTurns.unitId, unit.id), isNull(benchTurns.endedAt)));
}
