import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Page } from "playwright-core";
import { onTestFinished } from "vitest";

export interface RecordFiles {
  /** The PDF's text in reading order, blanks made one. */
  text: string;
  /** What qpdf says of the PDF's syntax. */
  qpdf: string;
  /** The address in the QR code of its first sheet. */
  qrAddress: string;
  /** SHA-256 of the JSON as downloaded, by sha256sum. */
  jsonHash: string;
  json: string;
}

/** Waits for the PDF on the record's page, downloads it and the JSON, and has public tools read them. */
export async function downloadRecord(page: Page): Promise<RecordFiles> {
  const folder = mkdtempSync(join(tmpdir(), "record-"));
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }));
  const run = (command: string, ...options: string[]) =>
    execFileSync(command, options, { encoding: "utf8", maxBuffer: 64 * 1024 * 1024, stdio: "pipe" });

  const pdf = join(folder, "record.pdf");
  const json = join(folder, "record.json");
  // The page looks by itself until the PDF is made.
  await download(page, /^PDF \(/, pdf);
  await download(page, "Data (JSON)", json);
  run("pdftoppm", "-r", "150", "-f", "1", "-l", "1", "-singlefile", "-png", pdf, join(folder, "cover"));
  return {
    text: run("pdftotext", pdf, "-").replace(/\s+/g, " "),
    qpdf: run("qpdf", "--check", pdf),
    qrAddress: run("zbarimg", "--quiet", "--raw", join(folder, "cover.png")).trim(),
    jsonHash: run("sha256sum", json).slice(0, 64),
    json: readFileSync(json, "utf8"),
  };
}

async function download(page: Page, link: string | RegExp, file: string): Promise<void> {
  const button = page.getByRole("link", { name: link });
  await button.waitFor();
  const [arrived] = await Promise.all([page.waitForEvent("download"), button.click()]);
  await arrived.saveAs(file);
}
