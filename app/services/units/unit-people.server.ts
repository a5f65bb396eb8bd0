import { eq } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";

const { people } = tables;

/** The name of a person whom a unit's row names. */
export async function findPersonName(db: Reader, personId: number): Promise<string> {
  const [person] = await db.select({ name: people.name }).from(people).where(eq(people.id, personId));
  if (!person) throw new Error(`There is no person ${personId}.`);
  return person.name;
}
