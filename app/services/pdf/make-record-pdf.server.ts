import { and, eq, inArray, isNull } from "drizzle-orm";
import { buffer } from "node:stream/consumers";
import sharp from "sharp";
import { type Database, inTransaction, tables } from "~/db/client.server";
import { appendEntry } from "~/services/audit/append-entry.server";
import { parseRecord, sha256Of } from "~/services/records/canonical-record";
import type { UnitRecord } from "~/services/records/record-format";
import { type ObjectStore, objectStore } from "~/services/storage/object-store.server";
import type { PrintedPhoto } from "./record-photos.server";
import { renderRecordPdf } from "./record-pdf.server";

const { decisions, files, records } = tables;

/** Pixels of a photo's longer side in print: about 200 dpi in half a sheet's width. */
const PRINT_PIXELS = 760;

/**
 * Makes the PDF of a record and stores it, once. May be run any number of times, also by two processes at once or
 * after a crash between any two of its steps: the bytes depend on the record alone, they go under one key, and the
 * row is written only while it has none.
 *
 * @param recordId id of the row in `records`
 * @throws UnavailableError when the file store doesn't answer; Error when the stored record or a photo was altered
 */
export async function makeRecordPdf(
  db: Database,
  recordId: number,
  now: () => Date,
  store: ObjectStore = objectStore(),
): Promise<void> {
  const [row] = await db
    .select({ record: records, signatureImage: decisions.signatureImage })
    .from(records)
    .innerJoin(decisions, eq(decisions.id, records.decisionId))
    .where(eq(records.id, recordId));
  if (!row) throw new Error(`There is no record ${recordId}.`);
  const stored = row.record;
  if (stored.pdfKey !== null) return;
  if (sha256Of(stored.canonicalJson) !== stored.sha256) {
    throw new Error(`Record ${recordId} is not what its SHA-256 says: it was altered. No PDF is made of it.`);
  }

  const record = parseRecord(stored.canonicalJson);
  const pdf = await renderRecordPdf({
    record,
    canonicalJson: stored.canonicalJson,
    sha256: stored.sha256,
    signaturePng: signatureOf(record, row.signatureImage),
    photos: await loadPhotos(db, record, store),
  });

  const pdfKey = `records/${stored.publicCode}.pdf`;
  await store.putBytes(pdfKey, pdf, "application/pdf");
  const pdfSha256 = sha256Of(pdf);
  await inTransaction(db, async (tx) => {
    const at = now();
    const [answer] = await tx
      .update(records)
      .set({ pdfKey, pdfSha256, pdfBytes: pdf.byteLength, pdfMadeAt: at })
      .where(and(eq(records.id, recordId), isNull(records.pdfKey)));
    if (answer.affectedRows !== 1) return;
    await appendEntry(tx, {
      workshopId: stored.workshopId,
      at,
      actorId: null,
      act: "record.pdf-made",
      unitId: stored.unitId,
      detail: { recordId, pdfSha256 },
    });
  });
}

function signatureOf({ decision }: UnitRecord, image: Buffer | null): Uint8Array | null {
  if (decision.signature.method === "typed") return null;
  if (!image || sha256Of(image) !== decision.signature.imageSha256) {
    throw new Error("The signature's image is not the one that the record names. No PDF is made.");
  }
  return image;
}

/** The record's photos from the store, checked against the record and sized for print. */
async function loadPhotos(db: Database, record: UnitRecord, store: ObjectStore): Promise<PrintedPhoto[]> {
  const named = record.files.filter((file) => file.kind === "photo");
  if (named.length === 0) return [];
  const rows = await db
    .select({ id: files.id, storageKey: files.storageKey })
    .from(files)
    .where(
      inArray(
        files.id,
        named.map((file) => file.id),
      ),
    );
  const photos: PrintedPhoto[] = [];
  for (const file of named) {
    const key = rows.find((row) => row.id === file.id)?.storageKey;
    if (key === undefined) throw new Error(`The record names photo ${file.id}, which has no row any more.`);
    const original = await buffer((await store.get(key)).body);
    if (sha256Of(original) !== file.sha256) {
      throw new Error(`Photo ${file.id} in the store is not the one that the record names.`);
    }
    const jpeg = await sharp(original)
      .resize(PRINT_PIXELS, PRINT_PIXELS, { fit: "inside", withoutEnlargement: true })
      .flatten({ background: "#ffffff" })
      .jpeg({ quality: 80 })
      .toBuffer();
    photos.push({ file, jpeg });
  }
  return photos;
}
