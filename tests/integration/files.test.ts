import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";
import { Readable } from "node:stream";
import { buffer } from "node:stream/consumers";
import { S3Client } from "@aws-sdk/client-s3";
import { eq } from "drizzle-orm";
import sharp from "sharp";
import { describe, expect, test } from "vitest";
import { tables } from "~/db/client.server";
import { loadSheet } from "~/services/bench/load-sheet.server";
import { database } from "~/services/database.server";
import {
  ConflictError,
  ForbiddenError,
  InvalidInputError,
  NotFoundError,
  UnavailableError,
} from "~/services/errors";
import { changeFile } from "~/services/files/change-file.server";
import { listFiles } from "~/services/files/list-files.server";
import { makePhoto } from "~/services/files/make-photo.server";
import { findFile } from "~/services/files/open-file.server";
import { receiveUpload } from "~/services/files/receive-upload.server";
import { PDF_BYTES, PHOTO_BYTES } from "~/services/files/upload-limits";
import { type ObjectStore, objectStore, s3ObjectStore } from "~/services/storage/object-store.server";
import { findUnit, type StandingUnit } from "~/services/unit-act.server";
import type { UnitState } from "~/workflow/states";
import { makeBench } from "../fixtures/bench";
import { makeBombPng, makeJpeg, makePdf } from "../fixtures/pictures";
import { makeUnit, makeWorkshop, type TestWorkshop } from "../fixtures/workshop";

const db = database();

async function setUp(state: UnitState = "draft") {
  const workshop = await makeWorkshop(db);
  const { number } = await makeUnit(db, workshop, { state });
  return { workshop, unit: await unitNow(workshop, number) };
}

async function unitNow({ workshop }: TestWorkshop, number: number): Promise<StandingUnit> {
  const unit = await findUnit(db, workshop.id, number);
  if (!unit) throw new Error("The unit is gone.");
  return unit;
}

function upload(
  bytes: Uint8Array<ArrayBuffer> | string,
  name = "photo.jpg",
  fields: Record<string, string> = {},
): Request {
  const form = new FormData();
  for (const [field, value] of Object.entries({ subject: "unit", ...fields })) form.append(field, value);
  form.append("file", new Blob([bytes], { type: "image/jpeg" }), name);
  return new Request("http://mainsgate.test/files", { method: "POST", body: form });
}

const bytesOf = (content: Buffer) => new Uint8Array(content);

/** Counts what is stored and taken back. */
function watched(store: ObjectStore): ObjectStore & { kept: Set<string> } {
  const kept = new Set<string>();
  return {
    kept,
    async putStream(key, body, type) {
      await store.putStream(key, body, type);
      kept.add(key);
    },
    async putBytes(key, body, type) {
      await store.putBytes(key, body, type);
      kept.add(key);
    },
    get: store.get,
    async remove(key) {
      await store.remove(key);
      kept.delete(key);
    },
  };
}

const storeAway = () =>
  s3ObjectStore(
    // Port 9 (discard): nobody listens there.
    new S3Client({
      region: "local-1",
      endpoint: "http://127.0.0.1:9",
      credentials: { accessKeyId: "a", secretAccessKey: "b" },
      maxAttempts: 1,
    }),
    "nowhere",
  );

/** The refusal of an upload; also makes sure that no row and no object stayed behind. */
async function refusalOf(request: Request, state: UnitState = "draft") {
  const { workshop, unit } = await setUp(state);
  const store = watched(objectStore());
  const refusal = await receiveUpload(workshop.as("builder"), unit, request, store).catch(
    (error: unknown) => error,
  );
  expect(await db.select().from(tables.files).where(eq(tables.files.unitId, unit.id))).toEqual([]);
  expect([...store.kept]).toEqual([]);
  return refusal;
}

async function read(store: ObjectStore, key: string | null): Promise<Buffer> {
  if (key === null) throw new Error("There is no such size.");
  return buffer((await store.get(key)).body);
}

test("a second file in one upload is refused, and the first isn't kept either", async () => {
  const form = new FormData();
  form.append("subject", "unit");
  for (const name of ["one.jpg", "two.jpg"]) {
    form.append("file", new Blob([bytesOf(await makeJpeg())], { type: "image/jpeg" }), name);
  }
  const refusal = await refusalOf(new Request("http://mainsgate.test/files", { method: "POST", body: form }));
  expect(refusal).toBeInstanceOf(InvalidInputError);
  expect(refusal).toMatchObject({ status: 400, message: "Send one file at a time. Nothing was kept." });
});

describe("a photo", () => {
  test("is kept upright, without metadata or position, in two sizes, and its hash is that of the kept bytes", async () => {
    const { workshop, unit } = await setUp();
    const original = await makeJpeg({ width: 2400, height: 1200, orientation: 6, position: true });
    const withPlace = await makeJpeg({ width: 2400, height: 1200, position: true });
    for (const picture of [original, withPlace]) expect(picture.includes("TESTCAMERA")).toBe(true);

    const turned = await receiveUpload(workshop.as("builder"), unit, upload(bytesOf(original), "turned.jpg"));
    expect(turned).toMatchObject({ kind: "photo", width: 800, height: 1600, originalName: "turned.jpg" });

    const placed = await receiveUpload(workshop.as("builder"), unit, upload(bytesOf(withPlace)));
    const [row] = await db.select().from(tables.files).where(eq(tables.files.id, placed.id));
    const full = await read(objectStore(), row?.storageKey ?? null);
    const thumb = await read(objectStore(), row?.thumbKey ?? null);
    for (const kept of [full, thumb]) {
      const metadata = await sharp(kept).metadata();
      expect(metadata.format).toBe("jpeg");
      expect(metadata.exif).toBeUndefined();
      expect(metadata.orientation).toBeUndefined();
      expect(kept.includes("TESTCAMERA")).toBe(false);
    }
    expect(await sharp(full).metadata()).toMatchObject({ width: 1600, height: 800 });
    expect(await sharp(thumb).metadata()).toMatchObject({ width: 320, height: 160 });
    expect(placed.sha256).toBe(createHash("sha256").update(full).digest("hex"));
    expect(placed.bytes).toBe(full.length);
  });

  test.each(["png", "webp", "avif"] as const)("may come as %s and is kept as JPEG", async (format) => {
    const { workshop, unit } = await setUp();
    const picture = await sharp(await makeJpeg({ width: 200, height: 100 }))
      .toFormat(format)
      .toBuffer();
    const file = await receiveUpload(
      workshop.as("builder"),
      unit,
      upload(bytesOf(picture), `picture.${format}`),
    );
    expect(file).toMatchObject({ kind: "photo", contentType: "image/jpeg", width: 200, height: 100 });
  });

  test("may come as HEIC, as phones make it, though sharp alone can't decode that", async () => {
    const { workshop, unit } = await setUp();
    // Our own drawing of a disc, 96 × 64 pixels, encoded with libheif's heif-enc.
    const heic = readFileSync(new URL("../fixtures/files/small.heic", import.meta.url));
    const file = await receiveUpload(workshop.as("builder"), unit, upload(bytesOf(heic), "small.heic"));
    expect(file).toMatchObject({ kind: "photo", contentType: "image/jpeg", width: 96, height: 64 });
    const [row] = await db.select().from(tables.files).where(eq(tables.files.id, file.id));
    const full = sharp(await read(objectStore(), row?.storageKey ?? null));
    const [red = 0, , blue = 255] = await full
      .extract({ left: 30, top: 32, width: 1, height: 1 })
      .raw()
      .toBuffer();
    // The disc's copper, not a black or green frame.
    expect(red).toBeGreaterThan(120);
    expect(blue).toBeLessThan(60);
  });

  test("waits for others to be decoded: two at a time, however many arrive together", async () => {
    const picture = await makeJpeg({ width: 1200, height: 900 });
    let most = 0;
    const look = () => {
      const { queue, process } = sharp.counters();
      most = Math.max(most, queue + process);
    };
    sharp.queue.on("change", look);
    const made = await Promise.all(
      Array.from({ length: 8 }, () => makePhoto(Readable.from([picture]), "image/jpeg")),
    );
    sharp.queue.off("change", look);
    expect(made.map(({ width }) => width)).toEqual(Array(8).fill(1200));
    expect(most).toBe(2);
  });

  test("its name is kept for showing, without folders; its key is ours", async () => {
    const { workshop, unit } = await setUp();
    const file = await receiveUpload(
      workshop.as("builder"),
      unit,
      upload(bytesOf(await makeJpeg({ width: 50, height: 50 })), "..\\..\\etc/passwd.jpg"),
    );
    expect(file.originalName).toBe("passwd.jpg");
    const [row] = await db.select().from(tables.files).where(eq(tables.files.id, file.id));
    expect(row?.storageKey).toMatch(/^files\/\d+\/[0-9a-f]{32}\.jpg$/);
  });
});

describe("bad input is refused in words, and nothing of it stays", () => {
  test("a file of 60 MB: too large", async () => {
    const large = new Uint8Array(60 * 1024 * 1024);
    large.set((await makeJpeg()).subarray(0, 5_000));
    const refusal = await refusalOf(upload(large));
    expect(refusal).toBeInstanceOf(InvalidInputError);
    expect(refusal).toMatchObject({ status: 413, message: "The file is too large: at most 25 MB." });
  });

  test("one byte above the limit is refused, the limit itself is not a matter of size", async () => {
    const jpeg = await makeJpeg({ width: 100, height: 100 });
    const padded = (length: number) => {
      const bytes = new Uint8Array(length);
      bytes.set(jpeg);
      return bytes;
    };
    expect(await refusalOf(upload(padded(PHOTO_BYTES + 1)))).toMatchObject({ status: 413 });
    const { workshop, unit } = await setUp();
    // What follows the picture's end is no part of it.
    await expect(
      receiveUpload(workshop.as("builder"), unit, upload(padded(PHOTO_BYTES - 1))),
    ).resolves.toMatchObject({ width: 100 });
  });

  test("a text named .jpg: wrong type, whatever it claims", async () => {
    expect(await refusalOf(upload("This is a text.\n".repeat(1_000)))).toMatchObject({ status: 415 });
  });

  test("an SVG, a GIF and a ZIP: wrong type", async () => {
    expect(await refusalOf(upload('<svg xmlns="http://www.w3.org/2000/svg"/>', "a.svg"))).toMatchObject({
      status: 415,
    });
    expect(await refusalOf(upload("GIF89a" + "\0".repeat(100), "a.gif"))).toMatchObject({ status: 415 });
    expect(await refusalOf(upload("PK\u0003\u0004" + "\0".repeat(100), "a.zip"))).toMatchObject({
      status: 415,
    });
  });

  test("an empty file", async () => {
    expect(await refusalOf(upload(""))).toMatchObject({ status: 400, message: "The file is empty." });
  });

  test("a decompression bomb: too many pixels, although it is small", async () => {
    const bomb = makeBombPng(30_000);
    expect(bomb.length).toBeLessThan(300_000);
    const refusal = await refusalOf(upload(bytesOf(bomb), "bomb.png"));
    expect(refusal).toMatchObject({ status: 422, message: expect.stringMatching(/too many pixels/) });
  });

  test("a JPEG cut off in the middle: damaged", async () => {
    const jpeg = await makeJpeg();
    const refusal = await refusalOf(upload(bytesOf(jpeg.subarray(0, Math.floor(jpeg.length / 2)))));
    expect(refusal).toMatchObject({ status: 422, message: expect.stringMatching(/damaged or incomplete/) });
  });

  test("a head of a JPEG followed by noise: damaged", async () => {
    const jpeg = await makeJpeg();
    const broken = Buffer.concat([jpeg.subarray(0, 200), Buffer.alloc(20_000, 0x55)]);
    expect(await refusalOf(upload(bytesOf(broken)))).toMatchObject({ status: 422 });
  });

  test("a PDF above 20 MB: too large", async () => {
    const refusal = await refusalOf(upload(bytesOf(makePdf(PDF_BYTES + 1)), "drawing.pdf"));
    expect(refusal).toMatchObject({ status: 413, message: "The file is too large: at most 20 MB." });
  });

  test("an upload that breaks off: told so, and the request ends", async () => {
    const boundary = "edge";
    const head = `--${boundary}\r\nContent-Disposition: form-data; name="subject"\r\n\r\nunit\r\n--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="a.jpg"\r\nContent-Type: image/jpeg\r\n\r\n`;
    const jpeg = await makeJpeg();
    const body = (fail: boolean) =>
      new ReadableStream<Uint8Array>({
        start(controller) {
          controller.enqueue(Buffer.from(head));
          controller.enqueue(jpeg.subarray(0, 10_000));
          if (fail) controller.error(new Error("The connection was reset."));
          else controller.close();
        },
      });
    for (const fail of [true, false]) {
      const request = new Request("http://mainsgate.test/files", {
        method: "POST",
        body: body(fail),
        headers: { "Content-Type": `multipart/form-data; boundary=${boundary}` },
        duplex: "half",
      } as RequestInit);
      expect(await refusalOf(request)).toMatchObject({
        status: 400,
        message: expect.stringMatching(/ended before/),
      });
    }
  });

  test("no file, no form, no subject, a check without its key", async () => {
    const empty = new FormData();
    empty.append("subject", "unit");
    expect(
      await refusalOf(new Request("http://mainsgate.test/", { method: "POST", body: empty })),
    ).toMatchObject({ status: 400, message: "Choose a file first." });
    expect(
      await refusalOf(new Request("http://mainsgate.test/", { method: "POST", body: "file=1" })),
    ).toMatchObject({ status: 415 });
    const jpeg = bytesOf(await makeJpeg({ width: 20, height: 20 }));
    expect(await refusalOf(upload(jpeg, "a.jpg", { subject: "nonsense" }))).toMatchObject({ status: 400 });
    expect(await refusalOf(upload(jpeg, "a.jpg", { subject: "check" }))).toMatchObject({
      status: 400,
      field: "checkKey",
    });
  });
});

describe("when the file store is away", () => {
  test("the upload says so, leaves no row, and works again afterwards", async () => {
    const { workshop, unit } = await setUp();
    const jpeg = bytesOf(await makeJpeg({ width: 60, height: 60 }));
    for (const request of [upload(jpeg), upload(bytesOf(makePdf()), "a.pdf")]) {
      const refusal = await receiveUpload(workshop.as("builder"), unit, request, storeAway()).catch(
        (error: unknown) => error,
      );
      expect(refusal).toBeInstanceOf(UnavailableError);
      expect(refusal).toMatchObject({ status: 503 });
    }
    expect(await listFiles(db, unit.id)).toEqual([]);
    await receiveUpload(workshop.as("builder"), unit, upload(jpeg));
    expect(await listFiles(db, unit.id)).toHaveLength(1);
  });

  test("when only the small size can't be stored, the large one is taken back", async () => {
    const { workshop, unit } = await setUp();
    const store = watched(objectStore());
    const failing: ObjectStore = {
      ...store,
      putBytes: (key, body, type) =>
        key.includes("thumb")
          ? Promise.reject(new UnavailableError("The file store"))
          : store.putBytes(key, body, type),
    };
    const jpeg = bytesOf(await makeJpeg({ width: 60, height: 60 }));
    await expect(receiveUpload(workshop.as("builder"), unit, upload(jpeg), failing)).rejects.toThrow(
      UnavailableError,
    );
    expect([...store.kept]).toEqual([]);
  });
});

describe("who may add a file", () => {
  test("is asked before a byte is stored, by what the file belongs to", async () => {
    const jpeg = bytesOf(await makeJpeg({ width: 20, height: 20 }));
    const { workshop, unit } = await setUp("draft");
    for (const role of ["inspector", "electrician", "archivist", "steward"] as const) {
      const store = watched(objectStore());
      await expect(receiveUpload(workshop.as(role), unit, upload(jpeg), store)).rejects.toThrow(
        ForbiddenError,
      );
      expect(store.kept.size).toBe(0);
    }
    const onBench = await setUp("on_bench");
    await expect(receiveUpload(onBench.workshop.as("builder"), onBench.unit, upload(jpeg))).rejects.toThrow(
      ForbiddenError,
    );
  });

  test("belongs to a check of the unit's sheet, named letter by letter, or is not kept", async () => {
    const bench = await makeBench(db);
    const inspector = bench.as("inspector");
    const unit = await unitNow(bench, bench.unit.number);
    const jpeg = bytesOf(await makeJpeg({ width: 20, height: 20 }));
    const [line] = (await loadSheet(inspector, unit)).lines;
    const checkKey = line?.check.key ?? "";
    const store = watched(objectStore());
    for (const wrong of ["no-such-check", checkKey.toUpperCase()]) {
      const request = upload(jpeg, "a.jpg", { subject: "check", checkKey: wrong });
      await expect(receiveUpload(inspector, unit, request, store)).rejects.toThrow(NotFoundError);
    }
    expect(store.kept.size).toBe(0);
    const request = upload(jpeg, "a.jpg", { subject: "check", checkKey });
    expect(await receiveUpload(inspector, unit, request, store)).toMatchObject({
      subject: "check",
      checkKey,
    });
    expect(await listFiles(db, unit.id, { checkKey })).toHaveLength(1);
    // The database too tells F1 from f1.
    expect(await listFiles(db, unit.id, { checkKey: checkKey.toUpperCase() })).toEqual([]);
  });

  test("is not added to the answer of a finding that is closed", async () => {
    const { workshop, unit } = await setUp("sent_back");
    const { inspector } = workshop.people;
    const at = workshop.clock.at;
    const [revision] = await db
      .select({ id: tables.revisions.id })
      .from(tables.revisions)
      .where(eq(tables.revisions.unitId, unit.id));
    const raise = async (number: number, closing: Partial<typeof tables.findings.$inferInsert>) => {
      const [row] = await db
        .insert(tables.findings)
        .values({
          unitId: unit.id,
          revisionId: revision?.id ?? 0,
          number,
          severity: "defect",
          text: "The lid is loose",
          raisedById: inspector.id,
          raisedAt: at,
          ...closing,
        })
        .$returningId();
      return String(row?.id);
    };
    const closed = await raise(1, { closedAt: at, closedById: inspector.id, closingText: "Seen" });
    const open = await raise(2, {});
    const jpeg = bytesOf(await makeJpeg({ width: 20, height: 20 }));
    const store = watched(objectStore());
    const answer = (findingId: string) =>
      receiveUpload(
        workshop.as("builder"),
        unit,
        upload(jpeg, "a.jpg", { subject: "answer", findingId }),
        store,
      );
    await expect(answer(closed)).rejects.toThrow(ConflictError);
    expect(store.kept.size).toBe(0);
    expect(await answer(open)).toMatchObject({ subject: "answer", findingId: Number(open) });
  });

  test("is asked again under the lock: what was stored meanwhile is taken back", async () => {
    const { workshop, unit } = await setUp();
    await db.update(tables.units).set({ state: "submitted" }).where(eq(tables.units.id, unit.id));
    const store = watched(objectStore());
    const jpeg = bytesOf(await makeJpeg({ width: 20, height: 20 }));
    await expect(receiveUpload(workshop.as("builder"), unit, upload(jpeg), store)).rejects.toThrow(
      ForbiddenError,
    );
    expect(store.kept.size).toBe(0);
  });

  test("a finding of another unit is no finding of this one", async () => {
    const { workshop, unit } = await setUp("on_bench");
    const other = await makeUnit(db, workshop, { state: "on_bench" });
    const [finding] = await db
      .insert(tables.findings)
      .values({
        unitId: other.id,
        revisionId: other.revisionId,
        number: 1,
        severity: "defect",
        text: "A finding of the other unit",
        raisedById: workshop.people.inspector.id,
        raisedAt: workshop.clock.at,
      })
      .$returningId();
    const store = watched(objectStore());
    const request = upload(bytesOf(await makeJpeg({ width: 20, height: 20 })), "a.jpg", {
      subject: "finding",
      findingId: String(finding?.id),
    });
    await expect(receiveUpload(workshop.as("inspector"), unit, request, store)).rejects.toThrow(
      NotFoundError,
    );
    expect(store.kept.size).toBe(0);
  });
});

describe("a kept file", () => {
  test("is found within its workshop only", async () => {
    const { workshop, unit } = await setUp();
    const pdf = await receiveUpload(
      workshop.as("builder"),
      unit,
      upload(bytesOf(makePdf(5_000)), "plan.pdf"),
    );
    expect(pdf).toMatchObject({ kind: "drawing", contentType: "application/pdf", bytes: 5_000 });
    const found = await findFile(workshop.as("inspector"), pdf.id, "full");
    const { body } = await found.open();
    expect((await buffer(body)).equals(makePdf(5_000))).toBe(true);
    // A PDF has no small size.
    await expect(findFile(workshop.as("inspector"), pdf.id, "thumb")).rejects.toThrow(NotFoundError);
    const foreign = await makeWorkshop(db);
    await expect(findFile(foreign.as("builder"), pdf.id, "full")).rejects.toThrow(NotFoundError);
  });

  test("can be named, taken back and brought back while its revision is worked on; the bytes stay", async () => {
    const { workshop, unit } = await setUp();
    const builder = workshop.as("builder");
    const file = await receiveUpload(
      builder,
      unit,
      upload(bytesOf(await makeJpeg({ width: 20, height: 20 }))),
    );
    await changeFile(builder, unit, { intent: "caption", fileId: file.id, caption: "Earth stud" });
    await changeFile(builder, unit, { intent: "remove", fileId: file.id });
    expect(await listFiles(db, unit.id)).toEqual([]);
    await expect(findFile(builder, file.id, "full")).rejects.toThrow(NotFoundError);
    await changeFile(builder, unit, { intent: "restore", fileId: file.id });
    expect(await listFiles(db, unit.id)).toMatchObject([{ id: file.id, caption: "Earth stud" }]);
    const acts = await db.select().from(tables.auditEntries).where(eq(tables.auditEntries.unitId, unit.id));
    expect(acts.map(({ act }) => act)).toEqual(["file.add", "file.caption", "file.remove", "file.restore"]);
  });

  test("of an examined revision stays as it was", async () => {
    const { workshop, unit } = await setUp();
    const builder = workshop.as("builder");
    const file = await receiveUpload(
      builder,
      unit,
      upload(bytesOf(await makeJpeg({ width: 20, height: 20 }))),
    );
    await db
      .update(tables.units)
      .set({ state: "sent_back", revision: 2 })
      .where(eq(tables.units.id, unit.id));
    await expect(changeFile(builder, unit, { intent: "remove", fileId: file.id })).rejects.toThrow(
      ConflictError,
    );
    expect(await listFiles(db, unit.id)).toHaveLength(1);
  });

  test("can't be changed by others, nor from another workshop or unit", async () => {
    const { workshop, unit } = await setUp();
    const file = await receiveUpload(
      workshop.as("builder"),
      unit,
      upload(bytesOf(await makeJpeg({ width: 20, height: 20 }))),
    );
    await expect(
      changeFile(workshop.as("inspector"), unit, { intent: "remove", fileId: file.id }),
    ).rejects.toThrow(ForbiddenError);
    const other = await setUp();
    await expect(
      changeFile(other.workshop.as("builder"), other.unit, { intent: "remove", fileId: file.id }),
    ).rejects.toThrow(NotFoundError);
  });
});
