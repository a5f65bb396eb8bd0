import { createRequire } from "node:module";
import { Worker } from "node:worker_threads";

/** Longer than the largest picture that is let through needs on a slow machine. */
const PATIENCE_MS = 90_000;

/** Given as text, so that it needs no file of its own beside the server's bundle. */
const work = `
  const { parentPort, workerData } = require("node:worker_threads");
  require(workerData.converter)({ buffer: workerData.bytes, format: "JPEG", quality: 0.92 })
    .then((jpeg) => parentPort.postMessage(new Uint8Array(jpeg)));
`;

/**
 * Turns a HEIC picture into a JPEG, upright. The converter computes for seconds without a pause, so it gets a thread of
 * its own: the server goes on answering.
 *
 * @throws Error for what is no whole HEIC picture, or takes too long
 */
export function convertHeic(bytes: Uint8Array): Promise<Uint8Array> {
  const converter = createRequire(import.meta.url).resolve("heic-convert");
  const worker = new Worker(work, { eval: true, workerData: { converter, bytes } });
  return new Promise<Uint8Array>((resolve, reject) => {
    const timer = setTimeout(() => reject(new Error("The conversion takes too long.")), PATIENCE_MS);
    worker.once("message", resolve);
    worker.once("error", reject);
    worker.once("exit", () => {
      clearTimeout(timer);
      reject(new Error("The conversion ended without a picture."));
    });
  }).finally(() => worker.terminate());
}
