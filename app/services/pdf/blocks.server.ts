import type { RGB } from "pdf-lib";
import {
  BODY,
  CONTENT,
  type Box,
  cautionEdge,
  cautionWash,
  copper,
  hex,
  ink,
  LEFT,
  type Paper,
  RIGHT,
  rule,
  soft,
  strongRule,
  type TextOptions,
  wash,
} from "./paper.server";

/** The blocks that a record is set from. Each draws at the paper's cursor and moves it down. */

/** A section's heading, never alone at the foot of a sheet. */
export function heading(paper: Paper, text: string, note = "", keepWith = 60): void {
  paper.need(30 + keepWith);
  paper.moveDown(12);
  const top = paper.top();
  paper.lines([text], LEFT, top, { size: 12.5, weight: "bold" });
  if (note !== "") {
    const width = paper.type.width(text, { size: 12.5, weight: "bold" });
    const shown = paper.fit(note, CONTENT - width - 14, { size: 7.6 }).lines[0] ?? "";
    paper.lines([shown], LEFT + width + 10, top - 4.4, { size: 7.6, color: soft });
  }
  paper.line(LEFT, top - 17, RIGHT, top - 17, copper, 1.2);
  paper.moveDown(23);
}

/** A text as wide as the sheet, or `width`; broken over sheets line by line. */
export function paragraph(
  paper: Paper,
  text: string,
  options: TextOptions & { indent?: number; after?: number } = {},
): void {
  const { indent = 0, after = 4, ...style } = options;
  const { lines, height } = paper.fit(text, CONTENT - indent, style);
  const step = height / lines.length;
  for (const line of lines) {
    paper.need(step);
    paper.lines([line], LEFT + indent, paper.top(), style);
    paper.moveDown(step);
  }
  paper.moveDown(after);
}

export interface Cell {
  label: string;
  value: string;
  /** Share of the row; 1 unless told. */
  span?: number;
  weight?: TextOptions["weight"];
  size?: number;
}

/** Rows of ruled cells with a small legend above each datum, as in a drawing's corner block. */
export function titleBlock(
  paper: Paper,
  rows: readonly (readonly Cell[])[],
  area = { x: LEFT, width: CONTENT },
): void {
  for (const row of rows) {
    const spans = row.reduce((sum, cell) => sum + (cell.span ?? 1), 0);
    const cells = row.map((cell) => {
      const width = (area.width * (cell.span ?? 1)) / spans;
      const style = { size: cell.size ?? 9, weight: cell.weight };
      return {
        cell,
        width,
        style,
        fitted: paper.fit(cell.value === "" ? "not known" : cell.value, width - 10, style),
      };
    });
    const height = Math.max(...cells.map(({ fitted }) => fitted.height)) + 15;
    paper.need(height);
    const top = paper.top();
    let x = area.x;
    for (const { cell, width, style, fitted } of cells) {
      paper.outline({ x, top, width, height }, strongRule, 0.6);
      paper.lines([cell.label.toUpperCase()], x + 5, top - 3.5, { size: 5.6, weight: "bold", color: soft });
      paper.lines(fitted.lines, x + 5, top - 11, { ...style, color: cell.value === "" ? soft : ink });
      x += width;
    }
    paper.moveDown(height);
  }
}

export interface TableColumn {
  header: string;
  /** Share of the width. */
  share: number;
}

export interface TableCell {
  text: string;
  weight?: TextOptions["weight"];
  color?: RGB;
  size?: number;
  /** Smaller lines under the text. */
  under?: { text: string; color?: RGB }[];
  /** A sign drawn before the text. */
  sign?: Sign;
}

export type TableRow = { kind: "row"; cells: TableCell[] } | { kind: "group"; text: string };

const PAD = 4;
const UNDER = 6.9;

/** A table whose header comes again on each sheet. A row is kept together unless it is higher than a sheet. */
export function table(
  paper: Paper,
  columns: readonly TableColumn[],
  rows: readonly TableRow[],
  options: { dense?: boolean } = {},
): void {
  const pad = options.dense ? 2.4 : PAD;
  const shares = columns.reduce((sum, column) => sum + column.share, 0);
  const widths = columns.map((column) => (CONTENT * column.share) / shares);
  const starts = widths.map(
    (_, index) => LEFT + widths.slice(0, index).reduce((sum, width) => sum + width, 0),
  );

  const header = () => {
    const top = paper.top();
    paper.fill({ x: LEFT, top, width: CONTENT, height: 15 }, wash);
    columns.forEach((column, index) => {
      paper.lines([column.header.toUpperCase()], (starts[index] ?? LEFT) + PAD, top - 4.5, {
        size: 5.8,
        weight: "bold",
        color: soft,
      });
    });
    paper.line(LEFT, top, RIGHT, top, strongRule, 0.8);
    paper.line(LEFT, top - 15, RIGHT, top - 15, strongRule, 0.8);
    paper.moveDown(15);
  };

  paper.need(50);
  header();
  for (const [index, row] of rows.entries()) {
    if (row.kind === "group") {
      // A group's heading stays with its first row.
      const next = rows[index + 1];
      const nextHeight =
        next?.kind === "row" ? Math.min(heightOf(layOut(paper, next.cells, widths), pad), 200) : 0;
      if (paper.need(17 + nextHeight)) header();
      const top = paper.top();
      paper.lines([row.text], LEFT + PAD, top - 4.5, { size: 8, weight: "bold", color: copper });
      paper.line(LEFT, top - 16, RIGHT, top - 16, rule);
      paper.moveDown(16);
      continue;
    }
    drawRow(paper, layOut(paper, row.cells, widths), starts, header, pad);
  }
  paper.line(LEFT, paper.top(), RIGHT, paper.top(), strongRule, 0.8);
  paper.moveDown(8);
}

interface LaidLine {
  text: string;
  style: TextOptions;
  step: number;
  sign?: Sign;
}

function layOut(paper: Paper, cells: readonly TableCell[], widths: readonly number[]): LaidLine[][] {
  return cells.map((cell, index) => {
    const width = (widths[index] ?? 0) - 2 * PAD;
    const indent = cell.sign ? 12 : 0;
    const style: TextOptions = { size: cell.size ?? BODY - 0.4, weight: cell.weight, color: cell.color };
    const main = paper.fit(cell.text, width - indent, style);
    const under = (cell.under ?? []).flatMap(({ text, color = soft }) => {
      const smaller: TextOptions = { size: UNDER, color };
      const fitted = paper.fit(text, width, smaller);
      return fitted.lines.map((line) => ({
        text: line,
        style: smaller,
        step: fitted.height / fitted.lines.length,
      }));
    });
    return [
      ...main.lines.map((text, line) => ({
        text,
        style,
        step: main.height / main.lines.length,
        ...(cell.sign && line === 0 ? { sign: cell.sign } : {}),
      })),
      ...under,
    ];
  });
}

function heightOf(laid: readonly LaidLine[][], pad: number): number {
  return Math.max(0, ...laid.map((cell) => cell.reduce((sum, line) => sum + line.step, 0))) + 2 * pad;
}

function drawRow(
  paper: Paper,
  laid: LaidLine[][],
  starts: readonly number[],
  header: () => void,
  pad: number,
): void {
  const height = heightOf(laid, pad);
  if (height <= paper.full - 40 && paper.need(height)) header();
  let rest = laid;
  while (rest.some((cell) => cell.length > 0)) {
    const room = paper.left() - 2 * pad;
    const parts = rest.map((cell) => takeLines(cell, room));
    if (parts.every((part) => part.taken.length === 0)) {
      paper.newSheet();
      header();
      continue;
    }
    const top = paper.top();
    let lowest = 0;
    parts.forEach(({ taken }, index) => {
      let y = top - pad;
      const x = (starts[index] ?? LEFT) + PAD;
      const indent = taken.some((line) => line.sign) ? 12 : 0;
      for (const line of taken) {
        if (line.sign) drawSign(paper, line.sign, x + 3.6, y - 5.4);
        paper.lines([line.text], x + (line.style.size === UNDER ? 0 : indent), y, line.style);
        y -= line.step;
      }
      lowest = Math.max(lowest, top - y);
    });
    paper.moveDown(lowest + pad);
    paper.line(LEFT, paper.top(), RIGHT, paper.top(), rule);
    rest = parts.map((part) => part.rest);
    if (rest.some((cell) => cell.length > 0)) {
      paper.newSheet();
      header();
    }
  }
}

function takeLines(cell: readonly LaidLine[], room: number): { taken: LaidLine[]; rest: LaidLine[] } {
  let used = 0;
  const count = cell.findIndex((line) => (used += line.step) > room);
  return count === -1
    ? { taken: [...cell], rest: [] }
    : { taken: cell.slice(0, count), rest: cell.slice(count) };
}

export type Sign = "pass" | "fail" | "undecided" | "none";

/** The sign of a verdict, of about seven points, centred: a tick, a cross, a question in a diamond, a dash. */
export function drawSign(paper: Paper, sign: Sign, x: number, y: number, scale = 1, color?: RGB): void {
  const at = (dx: number, dy: number) => ({ x: x + dx * scale, y: y + dy * scale });
  const stroke = (from: [number, number], to: [number, number], stroked: RGB) =>
    paper
      .page()
      .drawLine({ start: at(...from), end: at(...to), color: color ?? stroked, thickness: 1.5 * scale });
  if (sign === "pass") {
    const green = hex("1c6434");
    stroke([-3.2, 0], [-1, -2.6], green);
    stroke([-1, -2.6], [3.4, 3], green);
  } else if (sign === "fail") {
    const red = hex("a31621");
    stroke([-2.8, -2.8], [2.8, 2.8], red);
    stroke([-2.8, 2.8], [2.8, -2.8], red);
  } else if (sign === "undecided") {
    const amber = hex("754700");
    stroke([-3.4, 0], [0, 3.4], amber);
    stroke([0, 3.4], [3.4, 0], amber);
    stroke([3.4, 0], [0, -3.4], amber);
    stroke([0, -3.4], [-3.4, 0], amber);
  } else {
    stroke([-3, 0], [3, 0], soft);
  }
}

/** A boxed warning with the triangle of ISO 7010 W001 (shape from memory). */
export function cautionBox(paper: Paper, title: string, items: readonly string[]): void {
  const width = CONTENT - 56;
  const fitted = items.map((item) => paper.fit(item, width - 10, { size: 7.8 }));
  const height = fitted.reduce((sum, { height: each }) => sum + each + 2, 0) + 26;
  paper.need(height);
  const top = paper.top();
  const box: Box = { x: LEFT, top, width: CONTENT, height };
  paper.fill(box, cautionWash);
  paper.outline(box, cautionEdge, 1);
  const [x, y] = [LEFT + 24, top - 26];
  paper.page().drawSvgPath("M0 -15 L17 14 L-17 14 Z", {
    x,
    y,
    color: hex("f7c600"),
    borderColor: ink,
    borderWidth: 1.6,
  });
  paper.page().drawLine({ start: { x, y: y + 5 }, end: { x, y: y - 5 }, thickness: 2.6, color: ink });
  paper.page().drawCircle({ x, y: y - 9.4, size: 1.5, color: ink });
  paper.lines([title], LEFT + 50, top - 6, { size: 9, weight: "bold" });
  let line = top - 20;
  for (const { lines, height: each } of fitted) {
    paper.page().drawCircle({ x: LEFT + 52.5, y: line - 5, size: 1.1, color: ink });
    paper.lines(lines, LEFT + 58, line, { size: 7.8 });
    line -= each + 2;
  }
  paper.moveDown(height + 8);
}
