import { createHash } from "node:crypto";
import { and, asc, eq, ne } from "drizzle-orm";
import { type Database, inTransaction, tables } from "~/db/client.server";
import { appendEntry } from "~/services/audit/append-entry.server";

const { memberships, people, sessions } = tables;

/**
 * Changes the name under which a person acts from now on, and enters that in the trail of each workshop that they
 * belong to. Signed records keep the name that they were signed with.
 */
export async function renamePerson(db: Database, personId: number, name: string, now: Date): Promise<void> {
  await inTransaction(db, async (tx) => {
    const [person] = await tx
      .select({ name: people.name })
      .from(people)
      .where(eq(people.id, personId))
      .for("update");
    if (!person || person.name === name) return;
    await tx.update(people).set({ name }).where(eq(people.id, personId));
    const workshops = await tx
      .selectDistinct({ id: memberships.workshopId })
      .from(memberships)
      .where(eq(memberships.personId, personId))
      .orderBy(asc(memberships.workshopId));
    for (const { id } of workshops) {
      await appendEntry(tx, {
        workshopId: id,
        at: now,
        actorId: personId,
        act: "person.rename",
        // The trail holds no names; whoever claims one can be shown right or wrong by these.
        detail: { person: personId, before: sha256(person.name), after: sha256(name) },
      });
    }
  });
}

function sha256(text: string): string {
  return createHash("sha256").update(text).digest("hex");
}

/** Ends all sessions of a person but one; returns how many were ended. */
export async function revokeOtherSessions(db: Database, personId: number, keep: string): Promise<number> {
  const [answer] = await db
    .delete(sessions)
    .where(and(eq(sessions.personId, personId), ne(sessions.idHash, keep)));
  return answer.affectedRows;
}
