import sharp from "sharp";
import { InvalidInputError } from "~/services/errors";

const LARGEST_BYTES = 300_000;
const LARGEST_PIXELS = 4_000_000;
const OUTPUT = { width: 900, height: 300 };
/** Fewer dark pixels than this are a slip of the pen, not a signature. */
const FEWEST_INK_PIXELS = 120;
const SMALLEST_EXTENT = 24;

/**
 * Checks a drawn signature and re-encodes it: a real PNG, of sensible size, with something drawn on it. Cropped to the
 * ink, metadata dropped.
 *
 * @throws InvalidInputError for the form's field `signatureImage`
 */
export async function prepareSignature(png: Uint8Array): Promise<Buffer> {
  if (png.byteLength > LARGEST_BYTES) throw invalid("The drawing is too large: at most 300 kB.", 413);
  const { data, width, height } = await decode(png);
  const ink = inkBox(data, width, height);
  if (!ink)
    throw invalid("The field for the signature is empty. Draw your signature, or type your name instead.");
  return sharp(Buffer.from(png))
    .ensureAlpha()
    .extract(ink)
    .resize({ ...OUTPUT, fit: "inside", withoutEnlargement: true })
    .png({ compressionLevel: 9 })
    .toBuffer();
}

async function decode(png: Uint8Array) {
  try {
    const image = sharp(Buffer.from(png), { failOn: "error", limitInputPixels: LARGEST_PIXELS });
    const { format } = await image.metadata();
    if (format !== "png") throw new Error(`It is ${format}.`);
    const { data, info } = await image
      .ensureAlpha()
      .toColourspace("srgb")
      .raw()
      .toBuffer({ resolveWithObject: true });
    if (info.channels !== 4) throw new Error(`It has ${info.channels} channels.`);
    return { data, width: info.width, height: info.height };
  } catch (error) {
    throw invalid("The drawing did not arrive as an image that can be read. Draw it again.", 422, error);
  }
}

/** The rectangle around everything dark enough to be ink; null when there is too little of it. */
function inkBox(rgba: Uint8Array, width: number, height: number) {
  let pixels = 0;
  let [left, top, right, bottom] = [width, height, -1, -1];
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const at = (y * width + x) * 4;
      const [red = 255, green = 255, blue = 255, alpha = 0] = rgba.subarray(at, at + 4);
      if (alpha < 48 || (red + green + blue) / 3 > 180) continue;
      pixels++;
      left = Math.min(left, x);
      right = Math.max(right, x);
      top = Math.min(top, y);
      bottom = Math.max(bottom, y);
    }
  }
  const extent = Math.max(right - left, bottom - top);
  if (pixels < FEWEST_INK_PIXELS || extent < SMALLEST_EXTENT) return null;
  return { left, top, width: right - left + 1, height: bottom - top + 1 };
}

function invalid(message: string, status: 413 | 422 = 422, cause?: unknown): InvalidInputError {
  const error = new InvalidInputError("signatureImage", message, status);
  error.cause = cause;
  return error;
}
