import { eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import type { RoleHolder } from "~/services/people/role-holders.server";
import type { UnitRow } from "~/services/unit-act.server";

const { people } = tables;

/** Who closes a mail of the workshop, and that it is a demo where it is one. */
export function mailFrom({ workshop }: Pick<ServiceContext, "workshop">): string {
  return workshop.isDemo ? `${workshop.name} (demo: invented people and units)` : workshop.name;
}

/** How mails and pages name a unit: "Unit 7, “Bench supply”". */
export function unitTitle(unit: Pick<UnitRow, "number" | "name">): string {
  return `Unit ${unit.number}, “${unit.name}”`;
}

export async function findPerson(db: Reader, id: number): Promise<RoleHolder> {
  const [person] = await db
    .select({ id: people.id, name: people.name, email: people.email })
    .from(people)
    .where(eq(people.id, id));
  if (!person) throw new Error(`There is no person ${id}.`);
  return person;
}
