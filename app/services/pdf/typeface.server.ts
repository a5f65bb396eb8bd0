import { readFile } from "node:fs/promises";
import { createRequire } from "node:module";
import fontkit from "@pdf-lib/fontkit";
import type { PDFDocument, PDFFont, PDFPage, RGB } from "pdf-lib";
import { wrapText } from "./wrap-text";

/**
 * Public Sans in the two subsets that its package ships, then DejaVu for what it lacks (Ω, ≤, ≥, →, Greek, Cyrillic).
 * Only .woff and .ttf: a .woff2 ends the process from inside the font library.
 */
const files = {
  regular: [publicSans("latin", 400), publicSans("latin-ext", 400), dejavu("DejaVuSans")],
  bold: [publicSans("latin", 700), publicSans("latin-ext", 700), dejavu("DejaVuSans-Bold")],
  italic: [
    publicSans("latin", 400, "italic"),
    publicSans("latin-ext", 400, "italic"),
    dejavu("DejaVuSans-Oblique"),
  ],
  mono: [dejavu("DejaVuSansMono")],
} as const;

export type Weight = keyof typeof files;

/** Stands for a character that none of the fonts holds. */
const REPLACEMENT = "\ufffd";

const resolve = createRequire(import.meta.url).resolve;
const read = new Map<string, Promise<Uint8Array>>();

function publicSans(subset: string, weight: number, style = "normal") {
  return `@fontsource/public-sans/files/public-sans-${subset}-${weight}-${style}.woff`;
}

function dejavu(name: string) {
  return `dejavu-fonts-ttf/ttf/${name}.ttf`;
}

/** The font's bytes, read from disk once a process. */
function fontBytes(file: string): Promise<Uint8Array> {
  let bytes = read.get(file);
  if (!bytes) {
    bytes = readFile(resolve(file));
    read.set(file, bytes);
  }
  return bytes;
}

type Parsed = ReturnType<typeof fontkit.create>;
const parsed = new WeakMap<Uint8Array, Parsed>();

/** Parsing takes longer than setting a whole record; what is parsed holds no state of a document. */
const parseOnce = {
  create(bytes: Uint8Array): Parsed {
    let font = parsed.get(bytes);
    if (!font) {
      font = fontkit.create(bytes);
      parsed.set(bytes, font);
    }
    return font;
  },
};

interface Face {
  font: PDFFont;
  holds: ReadonlySet<number>;
}

export interface Style {
  weight?: Weight;
  /** Points. */
  size: number;
  color: RGB;
}

/** Sets text in a document's fonts, character by character in the first font that holds it. */
export interface Typeface {
  width(text: string, style: Pick<Style, "weight" | "size">): number;
  wrap(text: string, width: number, style: Pick<Style, "weight" | "size">): string[];
  /** Draws one line; `y` is its baseline. */
  draw(page: PDFPage, text: string, x: number, y: number, style: Style): void;
  /** Whether some character had to be drawn as {@link REPLACEMENT}. */
  replacedAny(): boolean;
}

/** Embeds the fonts (each as a subset of what gets used) and returns what sets text in them. */
export async function loadTypeface(document: PDFDocument): Promise<Typeface> {
  document.registerFontkit(parseOnce);
  const faces = {
    regular: await embedAll(document, files.regular),
    bold: await embedAll(document, files.bold),
    italic: await embedAll(document, files.italic),
    mono: await embedAll(document, files.mono),
  };
  let replaced = false;

  function runs(text: string, weight: Weight): { font: PDFFont; text: string }[] {
    const found: { font: PDFFont; text: string }[] = [];
    for (const raw of printable(text)) {
      let character = raw;
      let face = faceFor(faces[weight], character);
      if (!face) {
        replaced = true;
        character = REPLACEMENT;
        face = faceFor(faces[weight], character) ?? faces[weight][0];
      }
      const last = found.at(-1);
      if (last && last.font === face?.font) last.text += character;
      else if (face) found.push({ font: face.font, text: character });
    }
    return found;
  }

  const widths = new Map<PDFFont, Map<string, number>>();
  /** Character by character and remembered: without ligatures and kerning the sum is the text's width. */
  function runWidth(font: PDFFont, text: string): number {
    let known = widths.get(font);
    if (!known) widths.set(font, (known = new Map<string, number>()));
    let sum = 0;
    for (const character of text) {
      let width = known.get(character);
      if (width === undefined) known.set(character, (width = font.widthOfTextAtSize(character, 1)));
      sum += width;
    }
    return sum;
  }

  const width: Typeface["width"] = (text, { weight = "regular", size }) =>
    runs(text, weight).reduce((sum, run) => sum + size * runWidth(run.font, run.text), 0);

  return {
    width,
    wrap: (text, limit, style) => wrapText(text, limit, (part) => width(part, style)),
    draw(page, text, x, y, { weight = "regular", size, color }) {
      let at = x;
      for (const run of runs(text, weight)) {
        page.drawText(run.text, { x: at, y, size, font: run.font, color });
        at += size * runWidth(run.font, run.text);
      }
    },
    replacedAny: () => replaced,
  };
}

async function embedAll(document: PDFDocument, names: readonly string[]): Promise<Face[]> {
  const all: Face[] = [];
  for (const name of names) {
    // Figures of one width, so that readings stand under one another; no ligatures, so that text can be searched.
    const features = { tnum: true, liga: false, kern: false };
    const font = await document.embedFont(await fontBytes(name), { subset: true, features });
    all.push({ font, holds: new Set(font.getCharacterSet()) });
  }
  return all;
}

function faceFor(faces: readonly Face[], character: string): Face | undefined {
  const code = character.codePointAt(0) ?? 0;
  return faces.find((face) => face.holds.has(code));
}

/** Composed characters instead of combining marks where they exist; no control characters; blanks as blanks. */
function printable(text: string): string {
  return text
    .normalize("NFC")
    .replace(/\s/g, " ")
    .replace(/[\p{Cc}\p{Cf}\u{fe00}-\u{fe0f}]/gu, "");
}
