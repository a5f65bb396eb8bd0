import { and, asc, count, eq, inArray, isNull } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError, GuardError, NotFoundError } from "~/services/errors";
import { actOnWorkshop } from "~/services/workshop-act.server";
import { type Role, roles as allRoles } from "~/workflow/roles";
import { rolesHeld } from "./role-holders.server";

const { memberships, people, units } = tables;

export interface Member {
  id: number;
  name: string;
  email: string;
  roles: Role[];
  /** When the first of the roles held now was granted. */
  since: Date;
}

/** Everybody who holds a role in the workshop, by name; with `search`, those whose name or mail contains it. */
export async function listMembers({ db, workshop }: ServiceContext, search = ""): Promise<Member[]> {
  const rows = await db
    .select({
      id: people.id,
      name: people.name,
      email: people.email,
      role: memberships.role,
      grantedAt: memberships.grantedAt,
    })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(eq(memberships.workshopId, workshop.id))
    .orderBy(asc(people.name), asc(people.id));
  const wanted = search.trim().toLocaleLowerCase();
  return groupByPerson(rows).filter(
    ({ name, email }) =>
      name.toLocaleLowerCase().includes(wanted) || email.toLocaleLowerCase().includes(wanted),
  );
}

/** One member. @throws NotFoundError */
export async function getMember(context: ServiceContext, personId: number): Promise<Member> {
  const member = (await listMembers(context)).find(({ id }) => id === personId);
  if (!member) throw new NotFoundError("The person");
  return member;
}

/** Numbers of the units that a person has on the bench now: nobody else can work on them. */
export async function unitsOnBenchOf({ db, workshop }: ServiceContext, personId: number): Promise<number[]> {
  const rows = await db
    .select({ number: units.number })
    .from(units)
    .where(
      and(eq(units.workshopId, workshop.id), eq(units.inspectorId, personId), eq(units.state, "on_bench")),
    )
    .orderBy(asc(units.number));
  return rows.map((row) => row.number);
}

/** Numbers of the units that wait for a person as their builder: a steward hands them over when the person leaves. */
export async function unitsInHandsOf({ db, workshop }: ServiceContext, personId: number): Promise<number[]> {
  const rows = await db
    .select({ number: units.number })
    .from(units)
    .where(
      and(
        eq(units.workshopId, workshop.id),
        eq(units.builderId, personId),
        inArray(units.state, ["draft", "sent_back"]),
        isNull(units.discardedAt),
      ),
    )
    .orderBy(asc(units.number));
  return rows.map((row) => row.number);
}

/**
 * Gives a member exactly these roles. `expected` are the roles that the form showed.
 * @throws GuardError when the workshop would have no steward, ConflictError when somebody changed the roles meanwhile
 */
export function changeRoles(
  context: ServiceContext,
  personId: number,
  { expected, roles }: { expected: readonly Role[]; roles: readonly Role[] },
): Promise<void> {
  return actOnWorkshop(context, "people.manage", "people.roles", async ({ tx, workshop, at }) => {
    const held = await rolesHeld(tx, workshop.id, personId);
    if (held.length === 0) throw new NotFoundError("The person");
    if (!sameRoles(held, expected)) {
      throw new ConflictError(
        "Somebody else changed this person’s roles in the meantime. Look at them again.",
      );
    }
    const taken = held.filter((role) => !roles.includes(role));
    const given = roles.filter((role) => !held.includes(role));
    if (taken.includes("steward")) await requireAnotherSteward(tx, workshop.id);
    await take(tx, workshop.id, personId, taken);
    if (given.length > 0) {
      await tx
        .insert(memberships)
        .values(given.map((role) => ({ workshopId: workshop.id, personId, role, grantedAt: at })));
    }
    return {
      result: undefined,
      detail: { person: personId, given, taken },
      unchanged: taken.length + given.length === 0,
    };
  });
}

/**
 * Takes all roles from a member, who from the next request on sees nothing of the workshop. What they did stays.
 * @throws GuardError for the last steward, NotFoundError
 */
export function removeMember(context: ServiceContext, personId: number): Promise<void> {
  return actOnWorkshop(context, "people.manage", "people.remove", async ({ tx, workshop }) => {
    const held = await rolesHeld(tx, workshop.id, personId);
    if (held.length === 0) throw new NotFoundError("The person");
    if (held.includes("steward")) await requireAnotherSteward(tx, workshop.id);
    await take(tx, workshop.id, personId, held);
    return { result: undefined, detail: { person: personId, taken: held } };
  });
}

/** Counts under the workshop's lock, so two stewards can't remove each other at the same moment. */
async function requireAnotherSteward(tx: Transaction, workshopId: number): Promise<void> {
  const [row] = await tx
    .select({ stewards: count() })
    .from(memberships)
    .where(and(eq(memberships.workshopId, workshopId), eq(memberships.role, "steward")));
  if ((row?.stewards ?? 0) < 2) {
    throw new GuardError(["This is the workshop’s last steward. Make somebody else steward first."]);
  }
}

async function take(
  tx: Transaction,
  workshopId: number,
  personId: number,
  taken: readonly Role[],
): Promise<void> {
  if (taken.length === 0) return;
  await tx
    .delete(memberships)
    .where(
      and(
        eq(memberships.workshopId, workshopId),
        eq(memberships.personId, personId),
        inArray(memberships.role, [...taken]),
      ),
    );
}

function sameRoles(a: readonly Role[], b: readonly Role[]): boolean {
  return a.length === b.length && a.every((role) => b.includes(role));
}

function groupByPerson(
  rows: readonly { id: number; name: string; email: string; role: Role; grantedAt: Date }[],
): Member[] {
  const members = new Map<number, Member>();
  for (const { id, name, email, role, grantedAt } of rows) {
    const member = members.get(id) ?? { id, name, email, roles: [], since: grantedAt };
    member.roles = allRoles.filter((one) => one === role || member.roles.includes(one));
    if (grantedAt < member.since) member.since = grantedAt;
    members.set(id, member);
  }
  return [...members.values()];
}
