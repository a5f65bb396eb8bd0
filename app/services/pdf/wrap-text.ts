/** Measures a text set in one style; in points. */
export type Measure = (text: string) => number;

/**
 * Breaks a text into lines no wider than `width`. Line breaks in the text are kept, runs of blanks become one. A word
 * that is wider than a whole line (a hash, a link) is broken where it must be.
 */
export function wrapText(text: string, width: number, measure: Measure): string[] {
  return text.split(/\r\n|\r|\n/).flatMap((paragraph) => wrapParagraph(paragraph, width, measure));
}

function wrapParagraph(paragraph: string, width: number, measure: Measure): string[] {
  const words = paragraph.split(/[^\S\u00a0\u202f]+/).filter((word) => word !== "");
  const lines: string[] = [];
  let line = "";
  for (const word of words) {
    const joined = line === "" ? word : `${line} ${word}`;
    if (measure(joined) <= width) {
      line = joined;
      continue;
    }
    if (line !== "") lines.push(line);
    const pieces = breakWord(word, width, measure);
    lines.push(...pieces.slice(0, -1));
    line = pieces.at(-1) ?? "";
  }
  lines.push(line);
  return lines;
}

/** The word in pieces that each fit; at least one character a piece, so that it always ends. */
function breakWord(word: string, width: number, measure: Measure): string[] {
  if (measure(word) <= width) return [word];
  const pieces: string[] = [];
  let piece = "";
  for (const character of word) {
    if (piece !== "" && measure(piece + character) > width) {
      pieces.push(piece);
      piece = "";
    }
    piece += character;
  }
  pieces.push(piece);
  return pieces;
}
