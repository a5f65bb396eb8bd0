import { and, eq, ne } from "drizzle-orm";
import { type Database, tables } from "~/db/client.server";

const { people, sessions } = tables;

/** Changes the name under which a person acts from now on. Signed records keep the name that they were signed with. */
export async function renamePerson(db: Database, personId: number, name: string): Promise<void> {
  await db.update(people).set({ name }).where(eq(people.id, personId));
}

/** Ends all sessions of a person but one; returns how many were ended. */
export async function revokeOtherSessions(db: Database, personId: number, keep: string): Promise<number> {
  const [answer] = await db
    .delete(sessions)
    .where(and(eq(sessions.personId, personId), ne(sessions.idHash, keep)));
  return answer.affectedRows;
}
