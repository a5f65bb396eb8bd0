import type { PDFDocument } from "pdf-lib";
import { type PDFPage, rgb, type RGB } from "pdf-lib";
import type { Style, Typeface, Weight } from "./typeface.server";

/** Colours of the printed record: ink on white, one copper accent; verdicts are always words and signs as well. */
export const ink = hex("1b2126");
export const soft = hex("50585e");
export const rule = hex("c9c2b2");
export const strongRule = hex("6f6858");
export const copper = hex("944b18");
export const wash = hex("f6f2e9");
export const passColor = hex("1c6434");
export const passWash = hex("e6f2e7");
export const failColor = hex("a31621");
export const failWash = hex("fbe9e8");
export const doubtColor = hex("754700");
export const cautionWash = hex("fdf3cf");
export const cautionEdge = hex("8a6a00");

export function hex(code: string): RGB {
  const part = (from: number) => Number.parseInt(code.slice(from, from + 2), 16) / 255;
  return rgb(part(0), part(2), part(4));
}

/** A4, in points. */
const WIDTH = 595.28;
const HEIGHT = 841.89;
const FRAME = 22;
const STRIP = 34;
/** Left and right edge of the text, and the lowest line that content may reach. */
export const LEFT = 40;
export const RIGHT = WIDTH - 40;
export const CONTENT = RIGHT - LEFT;
const TOP = HEIGHT - 46;
const BOTTOM = FRAME + STRIP + 14;

export interface Box {
  x: number;
  /** Upper edge. */
  top: number;
  width: number;
  height: number;
}

export interface TextOptions {
  size?: number;
  weight?: Weight;
  color?: RGB;
  /** Distance between base lines as a multiple of the size. */
  leading?: number;
}

/**
 * Sheets of drawing paper, one after another, with a cursor that runs down. Coordinates are PDF points from the lower
 * left corner; `top` is an upper edge.
 */
export interface Paper {
  document: PDFDocument;
  type: Typeface;
  page(): PDFPage;
  /** Where the next content begins. */
  top(): number;
  moveDown(by: number): void;
  /** Makes sure that `height` fits below; otherwise begins a new sheet and says so. */
  need(height: number): boolean;
  newSheet(): void;
  /** Height left on this sheet. */
  left(): number;
  /** Height of a whole empty sheet. */
  full: number;
  /** Wraps a text and says how high it becomes. */
  fit(text: string, width: number, options?: TextOptions): { lines: string[]; height: number };
  /** Draws lines below `top`, at the page of now. */
  lines(lines: readonly string[], x: number, top: number, options?: TextOptions): void;
  fill(box: Box, color: RGB): void;
  outline(box: Box, color?: RGB, thickness?: number): void;
  line(x1: number, y1: number, x2: number, y2: number, color?: RGB, thickness?: number): void;
  /** Draws borders and strips of all sheets, once their number is known. */
  finish(strip: SheetStrip): void;
}

export interface SheetStrip {
  left: string;
  middle: string;
  hash: string;
}

export const BODY = 8.6;

export function startPaper(document: PDFDocument, type: Typeface): Paper {
  let page = document.addPage([WIDTH, HEIGHT]);
  let top = TOP;

  const styleOf = ({ size = BODY, weight = "regular", color = ink }: TextOptions): Style => ({
    size,
    weight,
    color,
  });
  const stepOf = ({ size = BODY, leading = 1.32 }: TextOptions) => size * leading;

  const paper: Paper = {
    document,
    type,
    page: () => page,
    top: () => top,
    moveDown(by) {
      top -= by;
    },
    need(height) {
      if (top - height >= BOTTOM) return false;
      paper.newSheet();
      return true;
    },
    newSheet() {
      page = document.addPage([WIDTH, HEIGHT]);
      top = TOP;
    },
    left: () => top - BOTTOM,
    full: TOP - BOTTOM,
    fit(text, width, options = {}) {
      const lines = type.wrap(text, width, styleOf(options));
      return { lines, height: lines.length * stepOf(options) };
    },
    lines(lines, x, from, options = {}) {
      const style = styleOf(options);
      const step = stepOf(options);
      lines.forEach((line, index) => {
        if (line !== "") type.draw(page, line, x, from - index * step - style.size * 0.96, style);
      });
    },
    fill({ x, top: upper, width, height }, color) {
      page.drawRectangle({ x, y: upper - height, width, height, color });
    },
    outline({ x, top: upper, width, height }, color = strongRule, thickness = 0.7) {
      page.drawRectangle({ x, y: upper - height, width, height, borderColor: color, borderWidth: thickness });
    },
    line(x1, y1, x2, y2, color = rule, thickness = 0.5) {
      page.drawLine({ start: { x: x1, y: y1 }, end: { x: x2, y: y2 }, color, thickness });
    },
    finish(strip) {
      const pages = document.getPages();
      pages.forEach((each, index) => drawFrame(each, type, strip, `Sheet ${index + 1} of ${pages.length}`));
    },
  };
  return paper;
}

/** The border of a drawing sheet with its centring marks, and the strip at its foot. */
function drawFrame(page: PDFPage, type: Typeface, strip: SheetStrip, count: string): void {
  const outer = { x: FRAME, y: FRAME, width: WIDTH - 2 * FRAME, height: HEIGHT - 2 * FRAME };
  page.drawRectangle({ ...outer, borderColor: ink, borderWidth: 1.1 });
  page.drawRectangle({
    x: outer.x + 3,
    y: outer.y + 3,
    width: outer.width - 6,
    height: outer.height - 6,
    borderColor: rule,
    borderWidth: 0.5,
  });
  const mark = { thickness: 1.1, color: ink };
  const [cx, cy] = [WIDTH / 2, HEIGHT / 2];
  page.drawLine({ start: { x: cx, y: HEIGHT - 12 }, end: { x: cx, y: HEIGHT - FRAME - 5 }, ...mark });
  page.drawLine({ start: { x: cx, y: 12 }, end: { x: cx, y: FRAME }, ...mark });
  page.drawLine({ start: { x: 12, y: cy }, end: { x: FRAME + 5, y: cy }, ...mark });
  page.drawLine({ start: { x: WIDTH - 12, y: cy }, end: { x: WIDTH - FRAME - 5, y: cy }, ...mark });

  const upper = FRAME + STRIP;
  const edges = [LEFT - 15, LEFT + 150, RIGHT - 78, RIGHT + 15];
  page.drawLine({
    start: { x: FRAME + 3, y: upper },
    end: { x: WIDTH - FRAME - 3, y: upper },
    color: ink,
    thickness: 0.8,
  });
  for (const x of edges.slice(1, 3)) {
    page.drawLine({ start: { x, y: FRAME + 3 }, end: { x, y: upper }, color: strongRule, thickness: 0.5 });
  }
  const cell = (
    legend: string,
    text: string,
    x: number,
    width: number,
    style: { size: number; weight?: Weight },
  ) => {
    type.draw(page, legend.toUpperCase(), x, upper - 10.5, { size: 5.4, weight: "bold", color: soft });
    const [first = ""] = type.wrap(text, width, style);
    type.draw(page, first === text ? text : `${first} …`, x, upper - 22, { ...style, color: ink });
  };
  cell(strip.left, strip.middle, LEFT - 12, 150, { size: 8, weight: "bold" });
  cell("SHA-256 of the record", strip.hash, LEFT + 157, 400, { size: 6.6, weight: "mono" });
  cell("Mainsgate", count, RIGHT - 71, 84, { size: 8, weight: "bold" });
}
