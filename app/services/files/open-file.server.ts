import type { Readable } from "node:stream";
import { and, eq, isNull } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { NotFoundError } from "~/services/errors";
import { objectStore, type ObjectStore } from "~/services/storage/object-store.server";

const { files } = tables;

export interface FileToServe {
  kind: "photo" | "drawing";
  contentType: string;
  originalName: string;
  /** Changes never, as the bytes don't. */
  etag: string;
  open(): Promise<{ body: Readable; bytes: number | undefined }>;
}

/**
 * A file of this workshop, ready to be opened; a PDF has one size only.
 *
 * @throws NotFoundError when it isn't in this workshop or was taken back
 */
export async function findFile(
  context: ServiceContext,
  fileId: number,
  size: "full" | "thumb",
  store: ObjectStore = objectStore(),
): Promise<FileToServe> {
  const [row] = await context.db
    .select()
    .from(files)
    .where(and(eq(files.id, fileId), eq(files.workshopId, context.workshop.id), isNull(files.removedAt)));
  const key = size === "full" ? row?.storageKey : row?.thumbKey;
  if (!row || !key) throw new NotFoundError("The file");
  return {
    kind: row.kind,
    contentType: row.contentType,
    originalName: row.originalName,
    etag: `"${row.sha256.slice(0, 32)}-${size}"`,
    open: () => store.get(key),
  };
}
