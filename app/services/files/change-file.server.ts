import { and, eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError, NotFoundError } from "~/services/errors";
import { actOnUnit, type StandingUnit } from "~/services/unit-act.server";
import { actionForSubject } from "./receive-upload.server";

const { files, revisions } = tables;

export type FileChange =
  | { intent: "caption"; fileId: number; caption: string }
  | { intent: "remove"; fileId: number }
  | { intent: "restore"; fileId: number };

/**
 * Names a file, takes it back or brings it back again. The row and the bytes stay; only files of the revision being
 * worked on can be changed, since earlier ones were evidence in their round.
 *
 * @throws NotFoundError, ForbiddenError, ConflictError
 */
export async function changeFile(
  context: ServiceContext,
  unit: StandingUnit,
  change: FileChange,
): Promise<void> {
  const before = await readFile(context.db, context.workshop.id, unit.id, change.fileId);
  await actOnUnit(context, actionForSubject[before.subject], { unitNumber: unit.number }, async (act) => {
    const file = await readFile(act.tx, context.workshop.id, unit.id, change.fileId);
    if (file.revision !== act.unit.revision) {
      throw new ConflictError(
        `This file belongs to revision ${file.revision}, which has been examined; it stays as it is.`,
      );
    }
    await act.tx.update(files).set(valuesOf(change, act.at)).where(eq(files.id, file.id));
    return { result: undefined, act: `file.${change.intent}`, detail: { file: file.id } };
  });
}

function valuesOf(change: FileChange, at: Date): Partial<typeof files.$inferInsert> {
  switch (change.intent) {
    case "caption":
      return { caption: change.caption };
    case "remove":
      return { removedAt: at };
    case "restore":
      return { removedAt: null };
  }
}

async function readFile(db: Pick<Transaction, "select">, workshopId: number, unitId: number, fileId: number) {
  const [file] = await db
    .select({ id: files.id, subject: files.subject, revision: revisions.number })
    .from(files)
    .innerJoin(revisions, eq(revisions.id, files.revisionId))
    .where(and(eq(files.id, fileId), eq(files.unitId, unitId), eq(files.workshopId, workshopId)));
  if (!file) throw new NotFoundError("The file");
  return file;
}
