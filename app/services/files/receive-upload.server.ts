import { createHash, randomBytes } from "node:crypto";
import { PassThrough, type Readable, Transform } from "node:stream";
import { pipeline } from "node:stream/promises";
import { and, eq } from "drizzle-orm";
import { z } from "zod";
import { tables } from "~/db/client.server";
import { fileSubjects } from "~/db/schema/units";
import { deriveBenchSheet } from "~/engine/bench-sheet";
import { perhapsOneLine } from "~/engine/typed-text";
import type { ServiceContext } from "~/services/context.server";
import {
  ConflictError,
  ForbiddenError,
  InvalidInputError,
  NotFoundError,
  ServiceError,
} from "~/services/errors";
import { objectStore, type ObjectStore } from "~/services/storage/object-store.server";
import { type Act, actOnUnit, type StandingUnit } from "~/services/unit-act.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { type Action, decide } from "~/workflow/permissions";
import { type FileView, listFiles } from "./list-files.server";
import { makePhoto } from "./make-photo.server";
import { type IncomingFile, readMultipart, tooLarge } from "./read-multipart.server";
import { sniffFile } from "./sniff-file.server";
import { PDF_BYTES } from "./upload-limits";

const { files, findings } = tables;

export type FileSubject = (typeof fileSubjects)[number];

/** Who may add, name or take back a file depends on what it belongs to. */
export const actionForSubject: Record<FileSubject, Action> = {
  unit: "unit.edit",
  answer: "finding.answer",
  check: "bench.work",
  finding: "bench.work",
};

const fieldsSchema = z
  .object({
    subject: z.enum(fileSubjects),
    checkKey: z.string().min(1).max(190).optional(),
    findingId: z.coerce.number().int().positive().optional(),
    caption: perhapsOneLine(300).default(""),
  })
  .refine((fields) => (fields.subject === "check") === (fields.checkKey !== undefined), {
    path: ["checkKey"],
    message: "A file of a check, and no other, names its check.",
  })
  .refine(
    (fields) =>
      (fields.subject === "finding" || fields.subject === "answer") === (fields.findingId !== undefined),
    { path: ["findingId"], message: "A file of a finding or an answer, and no other, names its finding." },
  );

type UploadFields = z.output<typeof fieldsSchema>;

/** What lies in the object store and waits for its row. */
interface StoredFile {
  kind: "photo" | "drawing";
  contentType: string;
  bytes: number;
  width: number | null;
  height: number | null;
  sha256: string;
  storageKey: string;
  thumbKey: string | null;
  originalName: string;
}

/**
 * Takes one photo or drawing out of a multipart request, makes the sizes that are kept, stores them and then, in one
 * transaction, its row. Multipart fields, sent before the file (`file`): `subject`, and by it `checkKey` or `findingId`;
 * `caption`.
 *
 * @param unit as the route has read it; everything is asked again under the row lock
 * @throws InvalidInputError (400, 413, 415, 422), ForbiddenError, NotFoundError, ConflictError, UnavailableError:
 *   nothing is kept then
 */
export async function receiveUpload(
  context: ServiceContext,
  unit: StandingUnit,
  request: Request,
  store: ObjectStore = objectStore(),
): Promise<FileView> {
  let kept: StoredFile | undefined;
  const { fields, stored } = await readMultipart(request, async (file) => {
    const fields = parseFields(file.fields);
    // Before a byte is decoded or stored: the sender may be somebody who may not add anything here.
    const decision = decide(
      actionForSubject[fields.subject],
      { id: context.person.id, roles: context.workshop.roles },
      unit,
    );
    if (!decision.allowed) throw new ForbiddenError(decision.reason);
    kept = await storeFile(context, file, store);
    return { fields, stored: kept };
  }).catch(async (error: unknown) => {
    // The request may be refused for what came after the file.
    if (kept) await discard(store, kept);
    throw error;
  });
  try {
    return await actOnUnit(context, actionForSubject[fields.subject], { unitNumber: unit.number }, (act) =>
      insertFile(context, act, fields, stored),
    );
  } catch (error) {
    await discard(store, stored);
    throw error;
  }
}

function parseFields(given: Readonly<Record<string, string>>): UploadFields {
  const parsed = fieldsSchema.safeParse(given);
  if (parsed.success) return parsed.data;
  const issue = parsed.error.issues[0];
  throw new InvalidInputError(
    String(issue?.path[0] ?? "subject"),
    issue?.message ?? "The upload says not what it belongs to.",
    400,
  );
}

async function storeFile(
  context: ServiceContext,
  file: IncomingFile,
  store: ObjectStore,
): Promise<StoredFile> {
  const sniffed = await sniffFile(file.stream);
  const prefix = `files/${context.workshop.id}/${randomBytes(16).toString("hex")}`;
  const originalName = lastPart(file.name);
  if (sniffed.kind === "pdf") {
    const pdf = await storePdf(sniffed.stream, `${prefix}.pdf`, store);
    return {
      ...pdf,
      kind: "drawing",
      contentType: "application/pdf",
      width: null,
      height: null,
      thumbKey: null,
      originalName,
    };
  }
  const photo = await makePhoto(sniffed.stream, sniffed.mime);
  const stored: StoredFile = {
    kind: "photo",
    contentType: "image/jpeg",
    bytes: photo.full.length,
    width: photo.width,
    height: photo.height,
    sha256: photo.sha256,
    storageKey: `${prefix}.jpg`,
    thumbKey: `${prefix}-thumb.jpg`,
    originalName,
  };
  try {
    await store.putBytes(stored.storageKey, photo.full, "image/jpeg");
    await store.putBytes(`${prefix}-thumb.jpg`, photo.thumb, "image/jpeg");
  } catch (error) {
    await discard(store, stored);
    throw error;
  }
  return stored;
}

async function storePdf(source: Readable, storageKey: string, store: ObjectStore) {
  const hash = createHash("sha256");
  let bytes = 0;
  const counter = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      bytes += chunk.length;
      if (bytes > PDF_BYTES) return done(tooLarge(PDF_BYTES));
      hash.update(chunk);
      done(null, chunk);
    },
  });
  const body = new PassThrough();
  const upload = store.putStream(storageKey, body, "application/pdf");
  const [read, put] = await Promise.allSettled([
    pipeline(source, counter, body),
    upload.catch((error: unknown) => {
      // The source must not wait for a reader that is gone.
      body.destroy();
      throw error;
    }),
  ]);
  // The reason lies with the file where it was refused, and with the store otherwise.
  if (read.status === "rejected" && read.reason instanceof ServiceError) throw read.reason;
  if (put.status === "rejected") throw put.reason;
  if (read.status === "rejected") throw read.reason;
  return { storageKey, bytes, sha256: hash.digest("hex") };
}

async function insertFile(
  context: ServiceContext,
  { tx, unit, at }: Act,
  fields: UploadFields,
  stored: StoredFile,
) {
  const revision = await loadRevision(tx, unit);
  if (fields.checkKey !== undefined) {
    const checks = deriveBenchSheet(revision.map, revision.ruleSet, revision.facts);
    if (!checks.some(({ key }) => key === fields.checkKey)) throw new NotFoundError("This check");
  }
  if (fields.findingId !== undefined) {
    const [finding] = await tx
      .select({ number: findings.number, closedAt: findings.closedAt })
      .from(findings)
      .where(and(eq(findings.id, fields.findingId), eq(findings.unitId, unit.id)));
    if (!finding) throw new NotFoundError("The finding");
    if (fields.subject === "answer" && finding.closedAt !== null) {
      throw new ConflictError(`Finding ${finding.number} is closed: nothing can be added to its answer.`);
    }
  }
  const [row] = await tx
    .insert(files)
    .values({
      ...stored,
      workshopId: context.workshop.id,
      unitId: unit.id,
      revisionId: revision.id,
      subject: fields.subject,
      checkKey: fields.checkKey ?? null,
      findingId: fields.findingId ?? null,
      caption: fields.caption,
      addedById: context.person.id,
      addedAt: at,
    })
    .$returningId();
  const view = row && (await listFiles(tx, unit.id)).find((file) => file.id === row.id);
  if (!view) throw new Error("The file's row was not kept.");
  return {
    result: view,
    act: "file.add",
    detail: { file: view.id, sha256: stored.sha256, subject: fields.subject },
  };
}

/** Best effort: an object without a row is unreachable, and harms nobody but the bill. */
async function discard(store: ObjectStore, stored: StoredFile): Promise<void> {
  const keys = [stored.storageKey, ...(stored.thumbKey ? [stored.thumbKey] : [])];
  await Promise.allSettled(keys.map((key) => store.remove(key)));
}

/** A file's name without the folders that some browsers send along, for showing only. */
function lastPart(name: string): string {
  const last = name.split(/[/\\]/).at(-1) ?? "";
  // Control characters have no business in a name.
  return Array.from(last)
    .filter((character) => character >= " " && character !== "\u007f")
    .join("")
    .slice(-200);
}
