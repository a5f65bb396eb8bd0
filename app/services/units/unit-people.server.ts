import { eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";

/** The name of a person that a unit's row names. */
export async function findPersonName(db: Reader, personId: number): Promise<string> {
  const [person] = await db
    .select({ name: tables.people.name })
    .from(tables.people)
    .where(eq(tables.people.id, personId));
  return person?.name ?? "";
}
