import { elementKinds, type FieldDescriptor } from "~/engine/elements";
import type { Conductor, Element } from "~/engine/energy-map";
import type { UnitRecord } from "~/services/records/record-format";
import { dayWords, momentWords } from "~/services/records/record-words";
import { heading, paragraph, table, titleBlock, type TableRow } from "./blocks.server";
import { copper, doubtColor, failColor, type Paper, passColor, soft } from "./paper.server";
import { drawMap } from "./map-drawing.server";
import type { RecordPdfInput } from "./record-pdf.server";

/** The energy map as a drawing, then element by element and conductor by conductor. */
export function drawMapSection(paper: Paper, { map }: UnitRecord): void {
  heading(paper, "Energy map", "Where energy comes from, what it passes and where it ends.", 160);
  drawMap(paper, map);
  table(
    paper,
    [
      { header: "Id", share: 8 },
      { header: "Element", share: 34 },
      { header: "Data, as described by the builder", share: 58 },
    ],
    map.elements.map((element): TableRow => ({
      kind: "row",
      cells: [
        { text: element.id, weight: "bold" },
        {
          text: element.label === "" ? elementKinds[element.kind].label : element.label,
          under: kindLine(element),
        },
        { text: dataWords(element), size: 7.6 },
      ],
    })),
  );
  table(
    paper,
    [
      { header: "Id", share: 8 },
      { header: "From", share: 17 },
      { header: "To", share: 17 },
      { header: "Circuit", share: 12 },
      { header: "Cross-section", share: 16 },
      { header: "Length", share: 13 },
      { header: "Insulation", share: 17 },
    ],
    map.conductors.map((conductor): TableRow => ({
      kind: "row",
      cells: [
        { text: conductor.id, weight: "bold" },
        { text: `${conductor.from.element} · ${conductor.from.terminal}` },
        { text: `${conductor.to.element} · ${conductor.to.terminal}` },
        { text: { mains: "mains", elv: "low voltage", earth: "earth" }[conductor.circuit] },
        { text: areaWords(conductor) },
        { text: conductor.lengthM === null ? "not known" : `${conductor.lengthM} m` },
        { text: conductor.insulation === "unknown" ? "not known" : conductor.insulation },
      ],
    })),
    { dense: true },
  );
}

function kindLine(element: Element) {
  return element.label === "" ? [] : [{ text: elementKinds[element.kind].label }];
}

/** An element's data in words, field by field; what isn't known is told as such. */
function dataWords(element: Element): string {
  const values: Record<string, unknown> = { ...element };
  const fields: readonly FieldDescriptor[] = elementKinds[element.kind].fields;
  return fields.map((field) => `${field.label}: ${valueWords(values[field.name], field)}`).join("; ");
}

function valueWords(value: unknown, field: FieldDescriptor): string {
  if (value === null || value === undefined || value === "unknown") return "not known";
  const text = String(value);
  const word = field.choices?.find((choice) => choice.value === text)?.label ?? text;
  return field.unit ? `${word} ${field.unit}` : word;
}

function areaWords({ area }: Conductor): string {
  if (area === null) return "not known";
  return "mm2" in area ? `${area.mm2} mm²` : `AWG ${area.awg}`;
}

const levels = {
  danger: { word: "Danger", color: failColor },
  defect: { word: "Defect", color: doubtColor },
  caution: { word: "Caution", color: doubtColor },
  unknown: { word: "Not known", color: doubtColor },
  good: { word: "Good", color: passColor },
};

/** What follows from the map alone, by computation. */
export function drawStatements(paper: Paper, { statements }: UnitRecord): void {
  heading(paper, "Computed from the map", "It holds as far as the map is true.");
  if (statements.length === 0) {
    paragraph(paper, "Nothing was computed.");
    return;
  }
  const order = ["danger", "defect", "unknown", "caution", "good"] as const;
  const sorted = order.flatMap((level) => statements.filter((statement) => statement.level === level));
  table(
    paper,
    [
      { header: "Level", share: 14 },
      { header: "Statement", share: 66 },
      { header: "About", share: 20 },
    ],
    sorted.map((statement): TableRow => ({
      kind: "row",
      cells: [
        { text: levels[statement.level].word, weight: "bold", color: levels[statement.level].color },
        { text: statement.text },
        { text: [...statement.elements, ...statement.conductors].join(", "), color: soft, size: 7.2 },
      ],
    })),
  );
}

/** Findings with the builder's answers and the inspector's closing. */
export function drawFindings(paper: Paper, { findings, workshop, checks }: UnitRecord): void {
  heading(paper, "Findings");
  if (findings.length === 0) {
    paragraph(paper, "No finding was raised.");
    return;
  }
  const at = (iso: string) => momentWords(iso, workshop.timeZone);
  table(
    paper,
    [
      { header: "No.", share: 5 },
      { header: "Finding", share: 50 },
      { header: "Answer and closing", share: 45 },
    ],
    findings.map((finding): TableRow => {
      const check = checks.find((each) => each.key === finding.checkKey);
      const where = [check?.title, finding.elementId].filter((part) => part !== undefined && part !== null);
      const { word, color } = { ...levels, advice: { word: "Advice", color: soft } }[finding.severity];
      return {
        kind: "row",
        cells: [
          { text: String(finding.number), color: soft },
          {
            text: finding.text,
            under: [
              {
                text: `${word} · revision ${finding.revision} · ${finding.raisedBy}, ${at(finding.raisedAt)}`,
                color,
              },
              ...(where.length > 0 ? [{ text: `On: ${where.join(", ")}` }] : []),
            ],
          },
          {
            text: finding.closing ? `Closed: ${finding.closing.text}` : "Open",
            weight: finding.closing ? undefined : "bold",
            under: [
              ...(finding.closing ? [{ text: `${finding.closing.by}, ${at(finding.closing.at)}` }] : []),
              ...finding.answers.map((answer) => ({
                text: `Answer in revision ${answer.revision} by ${answer.by}, ${at(answer.at)}: ${answer.text}`,
              })),
            ],
          },
        ],
      };
    }),
  );
}

/** The instruments whose readings count. */
export function drawInstruments(paper: Paper, { checks }: UnitRecord): void {
  const used = new Map<string, { name: string; serial: string; due: Set<string>; checks: number[] }>();
  checks.forEach(({ observation }, index) => {
    if (!observation?.instrument) return;
    const { name, serial, calibrationDue } = observation.instrument;
    const entry = used.get(serial) ?? { name, serial, due: new Set<string>(), checks: [] };
    entry.due.add(calibrationDue);
    entry.checks.push(index + 1);
    used.set(serial, entry);
  });
  if (used.size === 0) return;
  heading(paper, "Instruments");
  table(
    paper,
    [
      { header: "Instrument", share: 34 },
      { header: "Serial number", share: 22 },
      { header: "In calibration until", share: 22 },
      { header: "Checks", share: 22 },
    ],
    [...used.values()].map((entry): TableRow => ({
      kind: "row",
      cells: [
        { text: entry.name, weight: "bold" },
        { text: entry.serial },
        { text: [...entry.due].map(dayWords).join(", ") },
        { text: entry.checks.join(", "), color: soft },
      ],
    })),
  );
}

/** How anybody can see that this paper says what was signed. */
export function drawProof(paper: Paper, { record, sha256 }: RecordPdfInput): void {
  heading(paper, "About this record", "", 120);
  const policy =
    record.accuracyPolicy === "rect"
      ? "maker's accuracy taken as the half-width of a rectangular distribution, U = 2·a/√3 (JCGM 100, 4.3.7)"
      : "maker's accuracy taken as an expanded uncertainty with k = 2, U = a";
  titleBlock(paper, [
    [{ label: "SHA-256 of the record", value: sha256, weight: "mono", size: 8.4 }],
    [
      {
        label: "Rule set",
        value: `${record.ruleSet.key}, version ${record.ruleSet.version} (${record.ruleSet.region})`,
      },
      { label: "Uncertainty", value: policy, span: 2 },
    ],
  ]);
  paper.moveDown(6);
  paragraph(
    paper,
    "This paper is set from the file record.json that is attached to it. To see that nothing was changed, save the attachment, compute its SHA-256 (on most computers: sha256sum record.json) and compare it with the figure above and with the one that the workshop's trail holds.",
    { size: 8, color: soft },
  );
  if (paper.type.replacedAny()) {
    paragraph(
      paper,
      "Some characters are not in the fonts of this paper and are printed as \ufffd. The attached record holds them as they were written.",
      { size: 8, color: copper, weight: "bold" },
    );
  }
}
