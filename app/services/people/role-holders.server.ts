import { and, asc, eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import type { Role } from "~/workflow/roles";

const { memberships, people } = tables;

export interface RoleHolder {
  id: number;
  name: string;
  email: string;
}

/** Everybody who holds a role in a workshop, by name: whom a hand-over is told to. */
export function listRoleHolders(db: Reader, workshopId: number, role: Role): Promise<RoleHolder[]> {
  return db
    .select({ id: people.id, name: people.name, email: people.email })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.workshopId, workshopId), eq(memberships.role, role)))
    .orderBy(asc(people.name));
}
