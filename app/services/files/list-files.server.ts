import { and, asc, eq, inArray, isNull, type SQL } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";

const { files, people, revisions } = tables;

type FileRow = typeof files.$inferSelect;

/** A photo or drawing as pages show it; the bytes are at `/api/w/:workshop/files/:id/full` and `/thumb`. */
export interface FileView {
  id: number;
  unitId: number;
  kind: FileRow["kind"];
  subject: FileRow["subject"];
  checkKey: string | null;
  findingId: number | null;
  /** Revision that it was added to. */
  revision: number;
  caption: string;
  contentType: string;
  bytes: number;
  /** Pixels of the full size; null for a PDF. */
  width: number | null;
  height: number | null;
  sha256: string;
  originalName: string;
  addedBy: string;
  addedById: number;
  addedAt: Date;
}

export interface FileFilter {
  kind?: FileRow["kind"];
  subject?: FileRow["subject"];
  checkKey?: string;
  findingId?: number;
  revisionId?: number;
}

/** The files of a unit (or of several) that have not been taken back, the oldest first. */
export async function listFiles(
  db: Reader,
  unitId: number | readonly number[],
  filter: FileFilter = {},
): Promise<FileView[]> {
  const conditions: SQL[] = [inArray(files.unitId, [unitId].flat()), isNull(files.removedAt)];
  if (filter.kind) conditions.push(eq(files.kind, filter.kind));
  if (filter.subject) conditions.push(eq(files.subject, filter.subject));
  if (filter.checkKey !== undefined) conditions.push(eq(files.checkKey, filter.checkKey));
  if (filter.findingId !== undefined) conditions.push(eq(files.findingId, filter.findingId));
  if (filter.revisionId !== undefined) conditions.push(eq(files.revisionId, filter.revisionId));
  return db
    .select({
      id: files.id,
      unitId: files.unitId,
      kind: files.kind,
      subject: files.subject,
      checkKey: files.checkKey,
      findingId: files.findingId,
      revision: revisions.number,
      caption: files.caption,
      contentType: files.contentType,
      bytes: files.bytes,
      width: files.width,
      height: files.height,
      sha256: files.sha256,
      originalName: files.originalName,
      addedBy: people.name,
      addedById: files.addedById,
      addedAt: files.addedAt,
    })
    .from(files)
    .innerJoin(revisions, eq(revisions.id, files.revisionId))
    .innerJoin(people, eq(people.id, files.addedById))
    .where(and(...conditions))
    .orderBy(asc(files.id));
}
