import { and, asc, eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import type { Role } from "~/workflow/roles";

const { memberships, people } = tables;

export interface RoleHolder {
  id: number;
  name: string;
  email: string;
}

/**
 * Everybody who holds a role in a workshop, by name: whom a hand-over is told to. With `personId`, that person alone,
 * if they hold it.
 */
export async function listRoleHolders(
  db: Reader,
  workshopId: number,
  role: Role | "any",
  personId?: number,
): Promise<RoleHolder[]> {
  return db
    .selectDistinct({ id: people.id, name: people.name, email: people.email })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(
      and(
        eq(memberships.workshopId, workshopId),
        role === "any" ? undefined : eq(memberships.role, role),
        personId === undefined ? undefined : eq(people.id, personId),
      ),
    )
    .orderBy(asc(people.name), asc(people.id));
}

/** The roles that a person holds in a workshop at this moment, in the table's order. */
export async function rolesHeld(db: Reader, workshopId: number, personId: number): Promise<Role[]> {
  const rows = await db
    .select({ role: memberships.role })
    .from(memberships)
    .where(and(eq(memberships.workshopId, workshopId), eq(memberships.personId, personId)));
  return rows.map((row) => row.role);
}
