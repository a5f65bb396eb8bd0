import { fileTypeFromBuffer } from "file-type";
import { Readable } from "node:stream";
import { InvalidInputError } from "~/services/errors";

const HEAD_BYTES = 4_100;

const photoTypes = new Set([
  "image/jpeg",
  "image/png",
  "image/webp",
  "image/avif",
  "image/heic",
  "image/heif",
]);

export type SniffedFile =
  | { kind: "photo"; mime: string; stream: Readable }
  | { kind: "pdf"; mime: "application/pdf"; stream: Readable };

/**
 * Tells what a file is by its first bytes, whatever its name claims, and gives the stream back whole.
 *
 * @throws InvalidInputError (415) for anything but the photo types and PDF, (400) for an empty file
 */
export async function sniffFile(source: Readable): Promise<SniffedFile> {
  const chunks: AsyncIterator<Buffer> = source[Symbol.asyncIterator]();
  let head = Buffer.alloc(0);
  let ended = false;
  while (head.length < HEAD_BYTES && !ended) {
    const next = await chunks.next();
    if (next.done) ended = true;
    else head = Buffer.concat([head, next.value]);
  }
  if (head.length === 0) throw new InvalidInputError("file", "The file is empty.", 400);

  async function* whole() {
    yield head;
    if (!ended) yield* { [Symbol.asyncIterator]: () => chunks };
  }

  if (head.subarray(0, 5).toString("latin1") === "%PDF-") {
    return { kind: "pdf", mime: "application/pdf", stream: Readable.from(whole()) };
  }
  const type = await fileTypeFromBuffer(head);
  if (!type || !photoTypes.has(type.mime)) {
    throw new InvalidInputError(
      "file",
      `This is no photo that can be used${type ? ` (it is ${type.mime})` : ""}. Send JPEG, PNG, WebP, AVIF or HEIC; drawings also as PDF.`,
      415,
    );
  }
  return { kind: "photo", mime: type.mime, stream: Readable.from(whole()) };
}
