import { and, asc, eq } from "drizzle-orm";
import type { CurrentWorkshop } from "~/context";
import { type Database, tables } from "~/db/client.server";

const { memberships, workshops } = tables;

/** The workshops that a person belongs to, by name, for the switcher. */
export function listWorkshops(db: Database, personId: number) {
  return db
    .selectDistinct({ slug: workshops.slug, name: workshops.name })
    .from(workshops)
    .innerJoin(memberships, eq(memberships.workshopId, workshops.id))
    .where(eq(memberships.personId, personId))
    .orderBy(asc(workshops.name));
}

/** A workshop with the roles that the person holds in it; null when there is none or they hold none. */
export async function findWorkshop(
  db: Database,
  slug: string,
  personId: number,
): Promise<CurrentWorkshop | null> {
  const rows = await db
    .select({ workshop: workshops, role: memberships.role })
    .from(workshops)
    .innerJoin(memberships, and(eq(memberships.workshopId, workshops.id), eq(memberships.personId, personId)))
    .where(eq(workshops.slug, slug));
  const first = rows[0];
  if (!first) return null;
  const { nextUnitNumber: _, createdAt: __, ...workshop } = first.workshop;
  return { ...workshop, roles: rows.map((row) => row.role) };
}
