import sharp from "sharp";
import { describe, expect, test } from "vitest";
import { InvalidInputError } from "~/services/errors";
import { prepareSignature } from "./signature-image.server";

const pen = (path: string, background = "none") =>
  sharp(
    Buffer.from(
      `<svg xmlns="http://www.w3.org/2000/svg" width="420" height="120"><rect width="420" height="120" fill="${background}"/><path d="${path}" fill="none" stroke="#1b2126" stroke-width="4"/></svg>`,
    ),
  );
const drawn = "M60 80 C 80 10, 90 10, 85 80 S 120 20 140 70 S 200 90 220 40 S 260 90 300 60";
const plain = (background: string, width = 400, height = 120) =>
  sharp({ create: { width, height, channels: 4, background } });

test("a drawn signature is cropped to its ink and re-encoded, on glass or on white paper", async () => {
  for (const background of ["none", "#ffffff"]) {
    const given = await pen(drawn, background)
      .withExif({ IFD0: { Artist: "Somebody" } })
      .png()
      .toBuffer();
    expect((await sharp(given).metadata()).exif).toBeDefined();
    const prepared = await sharp(await prepareSignature(given)).metadata();
    expect(prepared.format).toBe("png");
    expect(prepared.width).toBeGreaterThan(200);
    expect(prepared.width).toBeLessThan(300);
    expect(prepared.height).toBeLessThan(90);
    expect(prepared.exif).toBeUndefined();
  }
});

test("a very large drawing is brought down to the size that is kept", async () => {
  const given = await pen(drawn).resize(2000, 571).png().toBuffer();
  const { width = 0, height = 0 } = await sharp(await prepareSignature(given)).metadata();
  expect(width).toBeLessThanOrEqual(900);
  expect(height).toBeLessThanOrEqual(300);
});

describe("no signature is", () => {
  test.each([
    ["an empty canvas", () => plain("#00000000").png().toBuffer()],
    ["white paper", () => plain("#ffffff").png().toBuffer()],
    ["a dot", () => pen("M60 60 l 3 0").png().toBuffer()],
    ["a JPEG", () => pen(drawn, "#ffffff").jpeg().toBuffer()],
    ["half a PNG", async () => (await pen(drawn).png().toBuffer()).subarray(0, 900)],
    ["a text that calls itself a PNG", () => Promise.resolve(Buffer.from("\u0089PNG\r\n\u001a\n hello"))],
    ["nothing at all", () => Promise.resolve(Buffer.alloc(0))],
    ["more than 300 kB", () => Promise.resolve(Buffer.alloc(300_001))],
    ["a picture of 36 million pixels", () => plain("#000000", 6000, 6000).png().toBuffer()],
  ])("%s", async (_name, make) => {
    const error: unknown = await prepareSignature(await make()).catch((thrown: unknown) => thrown);
    expect(error).toBeInstanceOf(InvalidInputError);
    expect(error).toMatchObject({ field: "signatureImage" });
  });
});
