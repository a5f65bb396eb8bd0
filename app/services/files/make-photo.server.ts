import { createHash } from "node:crypto";
import type { Readable } from "node:stream";
import { buffer } from "node:stream/consumers";
import pLimit from "p-limit";
import sharp, { type Sharp } from "sharp";
import { InvalidInputError } from "~/services/errors";
import { convertHeic } from "./convert-heic.server";
import { FULL_EDGE, PHOTO_PIXELS, THUMB_EDGE } from "./upload-limits";

/** A photo ready to be kept: upright, without metadata or position, in two sizes, both JPEG. */
export interface MadePhoto {
  full: Buffer;
  thumb: Buffer;
  width: number;
  height: number;
  /** Hex, over `full`. */
  sha256: string;
}

const reading = { failOn: "error", limitInputPixels: PHOTO_PIXELS } as const;

/** An unfolded picture takes hundreds of megabytes: those that arrive together wait for one another. */
const decoding = pLimit(2);

/**
 * Decodes an image once it has arrived and makes the two sizes that are kept; two images at most are decoded at a time.
 *
 * @throws InvalidInputError (422) for an image that is damaged, cut off or unfolds to too many pixels; whatever the
 *   stream fails with
 */
export async function makePhoto(stream: Readable, mime: string): Promise<MadePhoto> {
  // Outside the limit, so that a slow connection holds nobody up.
  const bytes = await buffer(stream).catch(refuse);
  return decoding(() => decode(bytes, mime));
}

async function decode(bytes: Buffer, mime: string): Promise<MadePhoto> {
  const isHeic = mime === "image/heic" || mime === "image/heif";
  const image = isHeic ? await fromHeic(bytes).catch(refuse) : sharp(bytes, reading);
  const { data, info } = await fit(image, FULL_EDGE, 84).toBuffer({ resolveWithObject: true }).catch(refuse);
  const thumb = await fit(sharp(data), THUMB_EDGE, 78).toBuffer();
  return {
    full: data,
    thumb,
    width: info.width,
    height: info.height,
    sha256: createHash("sha256").update(data).digest("hex"),
  };
}

/** Sharp's build can't decode HEIC (a patent matter), but knows its size; so a bomb is refused before decoding. */
async function fromHeic(bytes: Buffer): Promise<Sharp> {
  const { width, height } = await sharp(bytes, reading).metadata();
  if (!width || !height || width * height > PHOTO_PIXELS) throw new Error("pixel limit");
  // The converter has already turned the picture upright.
  return sharp(await convertHeic(bytes), reading);
}

function fit(image: Sharp, edge: number, quality: number): Sharp {
  return image
    .rotate()
    .resize({ width: edge, height: edge, fit: "inside", withoutEnlargement: true })
    .flatten({ background: "#ffffff" })
    .jpeg({ quality });
}

function refuse(error: unknown): never {
  if (error instanceof InvalidInputError) throw error;
  const message = error instanceof Error ? error.message : "";
  throw new InvalidInputError(
    "file",
    /pixel limit/i.test(message)
      ? "The picture has too many pixels. Please send a smaller one."
      : "The picture can't be read: it is damaged or incomplete. Please take or choose it again.",
  );
}
