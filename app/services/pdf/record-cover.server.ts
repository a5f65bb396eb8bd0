import { familyTitles } from "~/engine/bench-check";
import QRCode from "qrcode";
import type { UnitRecord } from "~/services/records/record-format";
import { dayWords, momentWords, tally } from "~/services/records/record-words";
import { nameMatches } from "~/services/signing/signing-rules";
import { cautionBox, drawSign, paragraph, type Sign, titleBlock } from "./blocks.server";
import {
  cautionWash,
  CONTENT,
  copper,
  doubtColor,
  failColor,
  failWash,
  ink,
  LEFT,
  type Paper,
  passColor,
  passWash,
  RIGHT,
  soft,
  strongRule,
} from "./paper.server";
import type { RecordPdfInput } from "./record-pdf.server";

/** The first sheet: what was decided about which unit, under which conditions, by whom. */
export async function drawCover(paper: Paper, { record, signaturePng }: RecordPdfInput): Promise<void> {
  const { decision, workshop } = record;
  const top = paper.top();
  paper.lines([workshop.name.toUpperCase()], LEFT, top, { size: 8, weight: "bold", color: copper });
  paper.lines(["Record of examination"], LEFT, top - 12, { size: 21, weight: "bold" });
  const made = momentWords(decision.at, workshop.timeZone);
  const width = paper.type.width(made, { size: 8 });
  paper.lines([made], RIGHT - width, top, { size: 8, color: soft });
  paper.moveDown(44);
  if (workshop.demo) {
    paragraph(paper, "Demonstration: the workshop, its people and all data in this record are invented.", {
      weight: "bold",
      color: copper,
    });
  }
  drawBanner(paper, record);
  drawUnit(paper, record);
  drawTerms(paper, record);
  await drawSignature(paper, record, signaturePng);
  drawFamilies(paper, record);
  cautionBox(paper, "Cautions", record.cautions);
}

function drawBanner(paper: Paper, { decision, checks, findings }: UnitRecord): void {
  const signed = decision.kind === "signed";
  const failed = checks.filter((check) => check.verdict === "fail").length;
  const lines = [
    signed && decision.recheckOn
      ? `Under the conditions below, until ${dayWords(decision.recheckOn)} at the latest.`
      : "For the reasons below.",
    `Checks: ${checks.length === 0 ? "none" : tally(checks)}. Findings: ${findings.length === 0 ? "none" : `${findings.length}, of which ${findings.filter((finding) => finding.closing === null).length} open`}.`,
    ...(signed && failed > 0
      ? [
          `It may be plugged in although ${failed === 1 ? "one check fails" : `${failed} checks fail`}: see the signer's reasons.`,
        ]
      : []),
  ];
  const height = 32 + lines.length * 12;
  const top = paper.top();
  const box = { x: LEFT, top, width: CONTENT, height };
  const { words, sign, color, wash } = !signed
    ? { words: "Refused: must not be plugged in", sign: "fail" as const, color: failColor, wash: failWash }
    : failed > 0
      ? { words: "Signed with departures", sign: "undecided" as const, color: doubtColor, wash: cautionWash }
      : { words: "Signed: may be plugged in", sign: "pass" as const, color: passColor, wash: passWash };
  paper.fill(box, wash);
  paper.outline(box, color, 1.6);
  drawSign(paper, sign, LEFT + 27, top - height / 2, 3, color);
  paper.lines([words], LEFT + 54, top - 8, { size: 15.5, weight: "bold", color });
  paper.lines(lines, LEFT + 54, top - 28, { size: 8.8 });
  paper.moveDown(height + 8);
}

function drawUnit(paper: Paper, record: UnitRecord): void {
  const { unit, facts, inspections, workshop } = record;
  const submitted = unit.revisions.find((revision) => revision.number === unit.revision)?.submittedAt;
  const inspectors = [...new Set(inspections.map((turn) => turn.inspector))];
  titleBlock(paper, [
    [
      { label: "Unit", value: unit.name, span: 3, weight: "bold", size: 11 },
      { label: "Number", value: String(unit.number), weight: "bold", size: 11 },
      { label: "Revision", value: String(unit.revision), weight: "bold", size: 11 },
    ],
    [
      { label: "Purpose", value: unit.purpose, span: 3 },
      { label: "Place of use", value: unit.placeOfUse, span: 2 },
    ],
    [
      { label: "Supply", value: `${facts.supplyVolts} V, ${facts.supplyHertz} Hz` },
      { label: "Protection class", value: facts.protectionClass },
      { label: "Limits by", value: `${record.ruleSet.title}, version ${record.ruleSet.version}`, span: 3 },
    ],
    [
      { label: "Built by", value: unit.builder, span: 2 },
      { label: "Inspected by", value: inspectors.join(", "), span: 2 },
      { label: "Submitted", value: submitted ? momentWords(submitted, workshop.timeZone) : "", span: 1 },
    ],
  ]);
  paper.moveDown(8);
}

function drawTerms(paper: Paper, { decision }: UnitRecord): void {
  const { conditions } = decision;
  if (conditions) {
    const told = (value: string) => (value.trim() === "" ? "no condition" : value);
    titleBlock(paper, [
      [
        { label: "Condition: place", value: told(conditions.place) },
        { label: "Condition: supply", value: told(conditions.supply) },
      ],
      [
        { label: "Condition: load", value: told(conditions.load) },
        { label: "Condition: supervision", value: told(conditions.supervision) },
      ],
      [
        { label: "Other conditions", value: told(conditions.other), span: 2 },
        {
          label: "Recheck by",
          value: decision.recheckOn ? dayWords(decision.recheckOn) : "",
          weight: "bold",
          size: 11,
        },
      ],
    ]);
    paper.moveDown(7);
  }
  if (decision.kind === "refused") paragraph(paper, "The reasons:", { size: 8.4, weight: "bold", after: 1 });
  paragraph(paper, decision.statement, { size: 9, after: 5 });
  if (decision.departures !== null) {
    paragraph(paper, "Why it may be used although checks fail:", { size: 8.4, weight: "bold", after: 1 });
    paragraph(paper, decision.departures, { size: 9, after: 5 });
  }
}

/** The families of checks at a glance, each with the tally of its verdicts. */
function drawFamilies(paper: Paper, { checks }: UnitRecord): void {
  const families = [...new Set(checks.map((check) => check.family))];
  if (families.length === 0) return;
  const columns = 4;
  const width = CONTENT / columns;
  const height = 23;
  const rows = Math.ceil(families.length / columns);
  paper.need(rows * height + 8);
  const top = paper.top();
  families.forEach((family, index) => {
    const box = {
      x: LEFT + (index % columns) * width,
      top: top - Math.floor(index / columns) * height,
      width,
      height,
    };
    const own = checks.filter((check) => check.family === family);
    paper.outline(box, strongRule, 0.5);
    drawSign(paper, familySign(own), box.x + 10, box.top - height / 2);
    paper.lines([familyTitles[family]], box.x + 20, box.top - 3.5, { size: 7.6, weight: "bold" });
    const [counts = ""] = paper.fit(tally(own), width - 24, { size: 6.8 }).lines;
    paper.lines([counts], box.x + 20, box.top - 13, { size: 6.8, color: soft });
  });
  paper.moveDown(rows * height + 9);
}

/** The worst verdict of a family gives its sign; a family in which nothing was measured or seen gets no tick. */
function familySign(checks: UnitRecord["checks"]): Sign {
  const has = (...verdicts: string[]) => checks.some((check) => verdicts.includes(check.verdict));
  if (has("fail")) return "fail";
  if (has("open", "undecided")) return "undecided";
  return has("pass") ? "pass" : "none";
}

const SIGNATURE_HEIGHT = 92;
const NOTE_WIDTH = 84;

async function drawSignature(
  paper: Paper,
  record: UnitRecord,
  signaturePng: Uint8Array | null,
): Promise<void> {
  const { decision, workshop } = record;
  const { licence } = decision.signer;
  paper.need(SIGNATURE_HEIGHT + 10);
  const top = paper.top();
  const qrSize = SIGNATURE_HEIGHT - 12;
  const panel = { x: LEFT, top, width: CONTENT, height: SIGNATURE_HEIGHT };
  paper.outline(panel, strongRule, 0.8);

  const signWidth = 172;
  if (signaturePng) {
    const image = await paper.document.embedPng(signaturePng);
    const scale = Math.min((signWidth - 24) / image.width, 50 / image.height, 1);
    const [width, height] = [image.width * scale, image.height * scale];
    paper.page().drawImage(image, { x: LEFT + 12, y: top - 60 + (50 - height) / 2, width, height });
  } else if (decision.signature.method === "typed") {
    const { lines } = paper.fit(decision.signature.typedName, signWidth - 24, { size: 16, weight: "italic" });
    paper.lines(lines.slice(0, 2), LEFT + 12, top - 30 + (lines.length > 1 ? 12 : 0), {
      size: 16,
      weight: "italic",
    });
  }
  paper.line(LEFT + 12, top - 64, LEFT + signWidth - 12, top - 64, ink, 0.7);
  const how =
    decision.signature.method === "drawn" ? "Signature, drawn in the act" : "Signature, typed in the act";
  paper.lines([how], LEFT + 12, top - 67, { size: 6.4, color: soft });
  paper.lines([momentWords(decision.at, workshop.timeZone)], LEFT + 12, top - 76, {
    size: 8,
    weight: "bold",
  });

  const x = LEFT + signWidth;
  paper.line(x, top, x, top - SIGNATURE_HEIGHT, strongRule, 0.5);
  const width = CONTENT - signWidth - qrSize - NOTE_WIDTH - 28;
  const facts = [
    { text: licence.holder, size: 10.5, weight: "bold" as const },
    // The account's own name only where it says something else.
    ...(nameMatches(decision.signer.name, licence.holder)
      ? []
      : [{ text: `signed in as ${decision.signer.name}`, size: 7.4 }]),
    { text: `Licence ${licence.number}`, size: 8.4 },
    { text: licence.authority, size: 8.4 },
    { text: `valid ${dayWords(licence.validFrom)} to ${dayWords(licence.validTo)}`, size: 8.4 },
    {
      text: `up to ${licence.maxSupplyVolts} V, ${licence.coversBatteries ? "batteries included" : "no batteries"}`,
      size: 8.4,
    },
  ];
  let y = top - 7;
  for (const { text, size, weight } of facts) {
    const fitted = paper.fit(text, width, { size, weight });
    paper.lines(fitted.lines.slice(0, 2), x + 10, y, { size, weight });
    y -= Math.min(2, fitted.lines.length) * size * 1.32 + 1;
  }

  const qrX = RIGHT - qrSize - 6;
  const note = paper.fit("How does this stand today? Scan, or open:", NOTE_WIDTH, { size: 7, color: soft });
  paper.lines(note.lines, qrX - NOTE_WIDTH - 8, top - 10, { size: 7, color: soft });
  const address = paper.fit(record.publicAddress, NOTE_WIDTH, { size: 7 });
  paper.lines(address.lines.slice(0, 6), qrX - NOTE_WIDTH - 8, top - 14 - note.height, { size: 7 });
  drawQr(paper, record.publicAddress, qrX, top - 6, qrSize);
  paper.moveDown(SIGNATURE_HEIGHT + 9);
}

/** The address as a QR code, drawn as squares so that it prints sharp at any size. */
function drawQr(paper: Paper, text: string, x: number, top: number, size: number): void {
  const { modules } = QRCode.create(text, { errorCorrectionLevel: "M" });
  const step = size / modules.size;
  for (let row = 0; row < modules.size; row++) {
    for (let column = 0; column < modules.size; column++) {
      if (!modules.get(row, column)) continue;
      // A hair wider, so that no viewer leaves white seams between neighbours.
      const edge = step * 1.02;
      paper.fill({ x: x + column * step, top: top - row * step, width: edge, height: edge }, ink);
    }
  }
}
