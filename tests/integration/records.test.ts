import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { buffer } from "node:stream/consumers";
import { S3Client } from "@aws-sdk/client-s3";
import { eq } from "drizzle-orm";
import { afterAll, describe, expect, test, vi } from "vitest";
import { openDatabase, tables } from "~/db/client.server";
import { database } from "~/services/database.server";
import { UnavailableError } from "~/services/errors";
import { runDueJobs } from "~/services/jobs/run-jobs.server";
import { makeRecordPdf } from "~/services/pdf/make-record-pdf.server";
import { renderRecordPdf } from "~/services/pdf/record-pdf.server";
import { canonicalRecord, parseRecord, sha256Of } from "~/services/records/canonical-record";
import { signUnit } from "~/services/signing/decide-on-unit.server";
import { type ObjectStore, objectStore, s3ObjectStore } from "~/services/storage/object-store.server";
import type { TestBench } from "../fixtures/bench";
import { sampleRecord } from "../fixtures/record";
import { drawnSignature, makeReviewable, signInput } from "../fixtures/signing";
import { ownerUrlOfThisFile } from "../helpers/database";

const db = database();
// The application itself can't change what a record says.
const owner = openDatabase(ownerUrlOfThisFile(), { connections: 2 });
afterAll(() => owner.close());
const folder = mkdtempSync(join(tmpdir(), "record-pdf-"));
afterAll(() => rmSync(folder, { recursive: true }));

function saved(name: string, bytes: Uint8Array): string {
  const file = join(folder, name);
  writeFileSync(file, bytes);
  return file;
}

const run = (command: string, ...options: string[]) =>
  execFileSync(command, options, { maxBuffer: 64 * 1024 * 1024 }).toString();

async function signed(): Promise<{ bench: TestBench; recordId: number }> {
  const bench = await makeReviewable(db);
  const electrician = bench.as("electrician");
  const signature = { method: "drawn" as const, png: await drawnSignature() };
  await signUnit(electrician, await signInput(electrician, bench.unit.number, { signature }));
  const [row] = await db
    .select({ id: tables.records.id })
    .from(tables.records)
    .where(eq(tables.records.unitId, bench.unit.id));
  if (!row) throw new Error("There is no record.");
  return { bench, recordId: row.id };
}

async function rowOf(recordId: number) {
  const [row] = await db.select().from(tables.records).where(eq(tables.records.id, recordId));
  if (!row) throw new Error("There is no record.");
  return row;
}

async function storedPdf(recordId: number): Promise<Buffer> {
  const { pdfKey } = await rowOf(recordId);
  return buffer((await objectStore().get(pdfKey ?? "")).body);
}

const pdfEntries = async ({ unit }: TestBench) =>
  (await db.select().from(tables.auditEntries).where(eq(tables.auditEntries.unitId, unit.id))).filter(
    ({ act }) => act === "record.pdf-made",
  );

describe("the PDF of a record", () => {
  test("is made by the job and holds what was signed, for people, for tools and for scanners", async () => {
    const { bench, recordId } = await signed();
    await runDueJobs(db, () => bench.clock.at);
    const row = await rowOf(recordId);
    const pdf = await storedPdf(recordId);
    expect(sha256Of(pdf)).toBe(row.pdfSha256);
    expect(pdf.byteLength).toBe(row.pdfBytes);
    const file = saved("record.pdf", pdf);

    expect(run("qpdf", "--check", file)).toContain("No syntax or stream encoding errors found");

    const record = parseRecord(row.canonicalJson);
    const text = run("pdftotext", "-layout", file, "-").replace(/\s+/g, " ");
    const pages = Number(/Pages:\s+(\d+)/.exec(run("pdfinfo", file))?.[1]);
    expect(text).toContain("Signed: may be plugged in");
    expect(text).toContain(record.unit.name);
    expect(text).toContain(record.decision.signer.licence.number);
    expect(text).toContain("4 May 2027");
    expect(text).toContain("Dangerous voltages");
    expect(text.split(row.sha256).length - 1).toBeGreaterThanOrEqual(pages);
    expect(text).toContain(`Sheet ${pages} of ${pages}`);
    // What stands in columns is torn apart by pdftotext's lines, so titles are looked for word by word, in order.
    const raw = run("pdftotext", file, "-").replace(/\s+/g, " ");
    for (const check of record.checks) expect(raw, check.title).toContain(check.title);
    expect(run("pdffonts", file)).toContain("PublicSans");
    const listed = run("pdfimages", "-list", file)
      .split("\n")
      .filter((line) => line.includes("jpeg"));
    expect(listed.length).toBe(record.files.filter(({ kind }) => kind === "photo").length);

    const attached = execFileSync("qpdf", [file, "--show-attachment=record.json"]);
    expect(attached.toString()).toBe(row.canonicalJson);
    expect(run("sha256sum", saved("attached.json", attached)).slice(0, 64)).toBe(row.sha256);
    const signature = execFileSync("qpdf", [file, "--show-attachment=signature.png"]);
    expect(record.decision.signature).toEqual({ method: "drawn", imageSha256: sha256Of(signature) });

    run("pdftoppm", "-r", "150", "-f", "1", "-l", "1", "-png", file, join(folder, "cover"));
    const cover = run("ls", folder)
      .split("\n")
      .find((name) => name.startsWith("cover"));
    expect(run("zbarimg", "--quiet", "--raw", join(folder, cover ?? "")).trim()).toBe(record.publicAddress);
    expect(record.publicAddress).toBe(`http://127.0.0.1:3000/r/${row.publicCode}`);
  });

  test("is made exactly once, whatever happens between signing and storing", async () => {
    const { bench, recordId } = await signed();
    const now = () => bench.clock.at;
    // The process ended right after the signing transaction: the job is there, nothing else.
    expect((await rowOf(recordId)).pdfKey).toBeNull();

    // It ended after storing the bytes, before the row was written.
    let stored: Uint8Array | undefined;
    const diesAfterwards: ObjectStore = {
      ...objectStore(),
      async putBytes(key, body, contentType) {
        await objectStore().putBytes(key, body, contentType);
        stored = body;
        throw new Error("The process was killed here.");
      },
    };
    await expect(makeRecordPdf(db, recordId, now, diesAfterwards)).rejects.toThrow("killed");
    expect((await rowOf(recordId)).pdfKey).toBeNull();

    // Two processes take it up at once; then the job comes round again.
    await Promise.all([makeRecordPdf(db, recordId, now), makeRecordPdf(db, recordId, now)]);
    const made = await rowOf(recordId);
    expect(made.pdfSha256).toBe(sha256Of(stored ?? new Uint8Array()));
    bench.clock.at = new Date(bench.clock.at.getTime() + 60_000);
    const untouchable: ObjectStore = {
      ...objectStore(),
      putBytes: () => Promise.reject(new Error("It was stored again.")),
    };
    await makeRecordPdf(db, recordId, now, untouchable);
    expect(await rowOf(recordId)).toEqual(made);
    expect(sha256Of(await storedPdf(recordId))).toBe(made.pdfSha256);
    expect(await pdfEntries(bench)).toHaveLength(1);
  });

  test("waits for the file store and comes when it is back", async () => {
    const { bench, recordId } = await signed();
    const nobodyThere = s3ObjectStore(
      new S3Client({
        region: "nowhere",
        endpoint: "http://127.0.0.1:9",
        forcePathStyle: true,
        credentials: { accessKeyId: "a", secretAccessKey: "b" },
        maxAttempts: 1,
      }),
      "bucket",
    );
    const now = () => bench.clock.at;
    await expect(makeRecordPdf(db, recordId, now, nobodyThere)).rejects.toBeInstanceOf(UnavailableError);
    expect(await rowOf(recordId)).toMatchObject({ pdfKey: null, pdfSha256: null });
    expect(await pdfEntries(bench)).toEqual([]);
    await makeRecordPdf(db, recordId, now);
    expect((await rowOf(recordId)).pdfKey).not.toBeNull();
  });

  test("a failing job is kept, told and tried again later", async () => {
    const { bench, recordId } = await signed();
    const told = vi.spyOn(console, "error").mockImplementation(() => undefined);
    const [photo] = await db.select().from(tables.files).where(eq(tables.files.unitId, bench.unit.id));
    const bytes = await buffer((await objectStore().get(photo?.storageKey ?? "")).body);
    await objectStore().putBytes(photo?.storageKey ?? "", Buffer.from("something else"), "image/jpeg");
    await runDueJobs(db, () => bench.clock.at);
    expect((await rowOf(recordId)).pdfKey).toBeNull();
    expect(told).toHaveBeenCalled();
    told.mockRestore();
    const job = async () =>
      (await db.select().from(tables.jobs).where(eq(tables.jobs.subjectId, recordId)))[0] ?? null;
    expect(await job()).toMatchObject({ attempts: 1, doneAt: null });
    expect((await job())?.lastError).toContain("is not the one that the record names");
    await objectStore().putBytes(photo?.storageKey ?? "", bytes, "image/jpeg");
    await runDueJobs(db, () => new Date(bench.clock.at.getTime() + 3_600_000));
    expect((await rowOf(recordId)).pdfKey).not.toBeNull();
    expect((await job())?.doneAt).not.toBeNull();
  });

  test("is never made of a record that was altered", async () => {
    const { bench, recordId } = await signed();
    const { canonicalJson } = await rowOf(recordId);
    await owner
      .update(tables.records)
      .set({ canonicalJson: canonicalJson.replace('"recheckOn":"2027-05-04"', '"recheckOn":"2029-05-04"') })
      .where(eq(tables.records.id, recordId));
    await expect(makeRecordPdf(db, recordId, () => bench.clock.at)).rejects.toThrow("altered");
    expect((await rowOf(recordId)).pdfKey).toBeNull();
  });
});

describe("setting a record", () => {
  const render = (record = sampleRecord()) => {
    const { json, sha256 } = canonicalRecord(record);
    return renderRecordPdf({ record, canonicalJson: json, sha256, signaturePng: null, photos: [] });
  };

  test("gives the same bytes for the same record and others for another", async () => {
    const [one, two] = [sha256Of(await render()), sha256Of(await render())];
    expect(one).toBe(two);
    const unit = { ...sampleRecord().unit, name: "Another" };
    expect(sha256Of(await render(sampleRecord({ unit })))).not.toBe(one);
  });

  test("prints scripts that the fonts hold, and shows what they lack instead of failing", async () => {
    const unit = {
      ...sampleRecord().unit,
      name: "Ωμέγα Лампа Łódź ≤ 0,3 Ω 漢字 🙂",
      purpose: "tab\there\u0000 and\u200b a null, a\u0301 composed á, ﷽",
    };
    const file = saved("scripts.pdf", await render(sampleRecord({ unit })));
    const text = run("pdftotext", file, "-");
    expect(text).toContain("Ωμέγα Лампа Łódź ≤ 0,3 Ω ");
    expect(text).toContain("�� �");
    expect(text).toContain("Some characters are not in the fonts");
    expect(text).toContain("tab here and a null, á composed á");
    expect(run("pdftotext", saved("plain.pdf", await render()), "-")).not.toContain("Some characters");
    expect(run("qpdf", "--check", file)).toContain("No syntax");
  });

  test("breaks long words, long cells and long tables over sheets with their headers", async () => {
    const base = sampleRecord();
    const [first] = base.checks;
    if (!first) throw new Error("The sample has no checks.");
    const long = {
      ...first,
      title: "W".repeat(400),
      because: Array.from({ length: 900 }, (_, index) => `word${index}`).join(" "),
    };
    const checks = [long, ...Array.from({ length: 120 }, () => base.checks).flat()];
    const file = saved("long.pdf", await render({ ...base, checks }));
    const pages = Number(/Pages:\s+(\d+)/.exec(run("pdfinfo", file))?.[1]);
    expect(pages).toBeGreaterThan(30);
    const text = run("pdftotext", file, "-");
    expect(text.match(/CHECK, LIMIT AND ITS SOURCE/g)?.length ?? 0).toBeGreaterThan(30);
    expect(text).toContain("word899");
    expect(text.match(/W/g)?.length ?? 0).toBeGreaterThanOrEqual(400);
    // Nothing runs out of the frame: every word's box lies on the sheet, inside its border.
    const boxes = [
      ...run("pdftotext", "-bbox", file, "-").matchAll(
        /xMin="([\d.]+)" yMin="([\d.]+)" xMax="([\d.]+)" yMax="([\d.]+)"/g,
      ),
    ];
    expect(boxes.length).toBeGreaterThan(1000);
    for (const [, left, top, right, bottom] of boxes) {
      expect(Number(left)).toBeGreaterThan(22);
      expect(Number(right)).toBeLessThan(595.28 - 22);
      expect(Number(top)).toBeGreaterThan(22);
      expect(Number(bottom)).toBeLessThan(841.89 - 22);
    }
  });
});
