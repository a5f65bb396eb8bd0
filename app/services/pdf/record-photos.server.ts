import type { RecordFile, UnitRecord } from "~/services/records/record-format";
import { momentWords } from "~/services/records/record-words";
import { heading, paragraph } from "./blocks.server";
import { CONTENT, LEFT, type Paper, rule, soft } from "./paper.server";

/** A photo of the record with its bytes as JPEG, sized for print. */
export interface PrintedPhoto {
  file: RecordFile;
  jpeg: Uint8Array;
}

const GAP = 14;
const WIDTH = (CONTENT - GAP) / 2;
const TALLEST = 190;

/** The photos, two in a row, each with what it shows; then the drawings, which stay in the workshop's store. */
export async function drawPhotos(
  paper: Paper,
  record: UnitRecord,
  photos: readonly PrintedPhoto[],
): Promise<void> {
  const drawings = record.files.filter((file) => file.kind === "drawing");
  for (let index = 0; index < photos.length; index += 2) {
    const pair = await Promise.all(
      photos.slice(index, index + 2).map((photo) => prepare(paper, record, photo)),
    );
    const height = Math.max(...pair.map((photo) => photo.height + photo.captionHeight)) + 12;
    if (index === 0) heading(paper, "Photos", "", height);
    paper.need(height);
    const top = paper.top();
    pair.forEach((photo, column) => {
      const x = LEFT + column * (WIDTH + GAP);
      const left = x + (WIDTH - photo.width) / 2;
      paper.page().drawImage(photo.image, {
        x: left,
        y: top - photo.height,
        width: photo.width,
        height: photo.height,
      });
      paper.outline({ x, top, width: WIDTH, height: photo.height }, rule);
      let y = top - photo.height - 4;
      for (const { lines, height: each, options } of photo.captions) {
        paper.lines(lines, x, y, options);
        y -= each;
      }
    });
    paper.moveDown(height);
  }
  if (drawings.length > 0) {
    heading(paper, "Drawings", "Kept in the workshop's store; named here by their hash.");
    for (const file of drawings) {
      paragraph(
        paper,
        `${file.caption === "" ? "Drawing" : file.caption} (${file.contentType}, ${file.bytes} bytes)`,
        {
          after: 0,
        },
      );
      paragraph(paper, `SHA-256 ${file.sha256}`, { size: 6.4, weight: "mono", color: soft });
    }
  }
}

async function prepare(paper: Paper, record: UnitRecord, { file, jpeg }: PrintedPhoto) {
  const image = await paper.document.embedJpg(jpeg);
  const scale = Math.min(WIDTH / image.width, TALLEST / image.height);
  const captions = [
    {
      text: captionWords(record, file),
      size: 7.8,
      color: undefined,
    },
    {
      text: `${file.addedBy}, ${momentWords(file.addedAt, record.workshop.timeZone)}, revision ${file.revision}`,
      size: 6.8,
      color: soft,
    },
    { text: `SHA-256 ${file.sha256.slice(0, 16)}…`, size: 6.4, color: soft },
  ].map(({ text, ...options }) => ({ ...paper.fit(text, WIDTH, options), options }));
  return {
    image,
    width: image.width * scale,
    height: image.height * scale,
    captions,
    captionHeight: captions.reduce((sum, { height }) => sum + height, 0) + 6,
  };
}

/** What the photo shows; a caption that only says again what it is about is left out. */
function captionWords(record: UnitRecord, file: RecordFile): string {
  const subject = subjectWords(record, file);
  return file.caption === "" || subject.endsWith(file.caption) ? subject : `${subject}: ${file.caption}`;
}

function subjectWords({ checks }: UnitRecord, file: RecordFile): string {
  switch (file.subject) {
    case "unit":
      return "The unit";
    case "check": {
      const index = checks.findIndex((check) => check.key === file.checkKey);
      const title = checks[index]?.title;
      return title ? `Check ${index + 1}, ${title}` : "A check of an earlier revision";
    }
    case "finding":
      return `Finding ${file.finding ?? ""}`.trim();
    case "answer":
      return `Answer to finding ${file.finding ?? ""}`.trim();
  }
}
