import convertHeic from "heic-convert";
import { createHash } from "node:crypto";
import type { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { buffer } from "node:stream/consumers";
import sharp, { type Sharp } from "sharp";
import { InvalidInputError } from "~/services/errors";
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

/**
 * Decodes an image as it arrives and makes the two sizes that are kept.
 *
 * @throws InvalidInputError (422) for an image that is damaged, cut off or unfolds to too many pixels; whatever the
 *   stream fails with
 */
export async function makePhoto(stream: Readable, mime: string): Promise<MadePhoto> {
  const isHeic = mime === "image/heic" || mime === "image/heif";
  const { data, info } = isHeic ? await fromHeic(stream) : await fromStream(stream);
  const thumb = await fit(sharp(data), THUMB_EDGE, 78).toBuffer();
  return {
    full: data,
    thumb,
    width: info.width,
    height: info.height,
    sha256: createHash("sha256").update(data).digest("hex"),
  };
}

async function fromStream(stream: Readable) {
  const decoder = sharp(reading);
  const output = fit(decoder, FULL_EDGE, 84).toBuffer({ resolveWithObject: true });
  const [made] = await Promise.all([output.catch(refuse), pipeline(stream, decoder).catch(refuse)]);
  return made;
}

/** Sharp's build can't decode HEIC (a patent matter), but knows its size; so a bomb is refused before decoding. */
async function fromHeic(stream: Readable) {
  const bytes = await buffer(stream);
  try {
    const { width, height } = await sharp(bytes, reading).metadata();
    if (!width || !height || width * height > PHOTO_PIXELS) throw new Error("pixel limit");
    // The converter has already turned the picture upright.
    const jpeg = await convertHeic({ buffer: bytes, format: "JPEG", quality: 0.92 });
    const upright = sharp(new Uint8Array(jpeg), reading);
    return await fit(upright, FULL_EDGE, 84).toBuffer({ resolveWithObject: true });
  } catch (error) {
    return refuse(error);
  }
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
