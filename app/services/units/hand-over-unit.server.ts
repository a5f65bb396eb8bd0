import { eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { GuardError } from "~/services/errors";
import { tellPeople, unitTitle } from "~/services/mail/hand-over.server";
import { listRoleHolders, type RoleHolder } from "~/services/people/role-holders.server";
import { actOnUnit, type StandingUnit, type UnitActInput } from "~/services/unit-act.server";
import { addFormerBuilder } from "./former-builders.server";
import { findPersonName } from "./unit-people.server";

/** Whether a unit's builder has left, and who could go on with it. */
export interface HandOverChoice {
  /** The builder builds in this workshop no more. */
  needed: boolean;
  /** Builders who never inspected it. */
  candidates: { id: number; name: string }[];
}

export async function loadHandOver(
  db: Reader,
  workshopId: number,
  unit: StandingUnit,
): Promise<HandOverChoice> {
  const builders = await listRoleHolders(db, workshopId, "builder");
  return {
    needed: !builders.some(({ id }) => id === unit.builderId),
    candidates: candidatesOf(builders, unit).map(({ id, name }) => ({ id, name })),
  };
}

function candidatesOf(builders: readonly RoleHolder[], unit: StandingUnit): RoleHolder[] {
  return builders.filter(({ id }) => id !== unit.builderId && !unit.inspectorIds.includes(id));
}

/**
 * Gives a draft, or a unit that was sent back, to another builder when its own builds in this workshop no more. Both
 * count as its builders from then on, so neither may inspect or sign it. The new builder is told.
 *
 * @throws GuardError while its builder is still there, and for whoever is no builder or inspected it; ForbiddenError,
 *   ConflictError
 */
export function handOverUnit(
  context: ServiceContext,
  input: UnitActInput & { toId: number },
): Promise<{ name: string }> {
  return actOnUnit(context, "unit.hand-over", input, async ({ tx, unit, at }) => {
    const builders = await listRoleHolders(tx, context.workshop.id, "builder");
    const before = await findPersonName(tx, unit.builderId);
    if (builders.some(({ id }) => id === unit.builderId)) {
      throw new GuardError([`${before} still builds in this workshop and alone can go on with this unit.`]);
    }
    const heir = candidatesOf(builders, unit).find(({ id }) => id === input.toId);
    if (!heir) {
      throw new GuardError(["Choose one of the workshop’s builders who never had this unit on the bench."]);
    }
    await addFormerBuilder(tx, {
      unitId: unit.id,
      personId: unit.builderId,
      handedOnById: context.person.id,
      handedOnAt: at,
    });
    await tx.update(tables.units).set({ builderId: heir.id }).where(eq(tables.units.id, unit.id));
    const others = heir.id === context.person.id ? [] : [heir];
    await tellPeople(context, { tx, at }, others, () => ({
      subject: `${unitTitle(unit)} is yours to go on with`,
      paragraphs: [
        `${context.person.name} handed ${unitTitle(unit)} over to you, because ${before} no longer builds in this workshop.`,
        "Check its energy map against the unit itself before you submit it: from now on you answer for it. Don't plug it in.",
      ],
      link: { label: "See the unit", path: `/units/${unit.number}` },
    }));
    return { result: { name: heir.name }, detail: { from: unit.builderId, to: heir.id } };
  });
}
