const MEGABYTE = 1024 * 1024;

/** The most that one photo may weigh as it comes from the camera. */
export const PHOTO_BYTES = 25 * MEGABYTE;
/** The most that one drawing as PDF may weigh. */
export const PDF_BYTES = 20 * MEGABYTE;
/** A request that goes on beyond this is cut off instead of read to its end. */
export const REQUEST_BYTES = 100 * MEGABYTE;
/** Pixels that an image may unfold to: more than any camera phone makes, far less than a decompression bomb. */
export const PHOTO_PIXELS = 120_000_000;
/** The longer edge of the two sizes that are kept. */
export const FULL_EDGE = 1600;
export const THUMB_EDGE = 320;
