import { familyTitles } from "~/engine/bench-check";
import type { RecordCheck, UnitRecord } from "~/services/records/record-format";
import {
  citationWords,
  limitWords,
  momentWords,
  observationWords,
  uncertaintyWords,
  verdictWords,
} from "~/services/records/record-words";
import { dayText } from "~/workflow/day-text";
import { heading, type Sign, table, type TableCell, type TableRow, paragraph } from "./blocks.server";
import { doubtColor, failColor, ink, type Paper, passColor, soft } from "./paper.server";

const signs: Record<RecordCheck["verdict"], { sign: Sign; color: typeof passColor }> = {
  pass: { sign: "pass", color: passColor },
  fail: { sign: "fail", color: failColor },
  undecided: { sign: "undecided", color: doubtColor },
  open: { sign: "undecided", color: doubtColor },
  "not-applicable": { sign: "none", color: soft },
  "not-possible": { sign: "none", color: soft },
};

/** Every check with limit and source, reading with uncertainty and instrument, and verdict. */
export function drawChecks(paper: Paper, record: UnitRecord): void {
  heading(paper, "Checks", "A reading passes only when it is clear of the limit by its uncertainty.");
  if (record.checks.length === 0) {
    paragraph(paper, "The sheet has no checks.");
    return;
  }
  const rows: TableRow[] = [];
  record.checks.forEach((check, index) => {
    if (check.family !== record.checks[index - 1]?.family)
      rows.push({ kind: "group", text: familyTitles[check.family] });
    rows.push({ kind: "row", cells: checkCells(check, index + 1, record.workshop.timeZone) });
  });
  table(
    paper,
    [
      { header: "No.", share: 5 },
      { header: "Check, limit and its source", share: 44 },
      { header: "Reading or answer", share: 33 },
      { header: "Verdict", share: 18 },
    ],
    rows,
  );
}

function checkCells(check: RecordCheck, number: number, timeZone: string): TableCell[] {
  const { sign, color } = signs[check.verdict];
  return [
    { text: String(number), color: soft },
    { text: check.title, weight: "bold", under: askLines(check) },
    observationCell(check, timeZone),
    { text: verdictWords[check.verdict], weight: "bold", color, sign, under: verdictLines(check) },
  ];
}

function askLines(check: RecordCheck): NonNullable<TableCell["under"]> {
  const asked =
    check.asks.kind === "reading"
      ? [`${check.asks.quantity}: ${limitWords(check.asks.limit)}`]
      : [check.asks.question];
  const limitSource = check.asks.kind === "reading" ? [check.asks.limit.citation] : [];
  const sources = new Set([...limitSource, ...check.citations].map(citationWords));
  return [
    ...asked.map((text) => ({ text, color: ink })),
    { text: `${sources.size === 1 ? "Source" : "Sources"}: ${[...sources].join("; ")}` },
    ...(check.computed
      ? [
          {
            text: `From the map: ${check.computed.verdict}. ${check.computed.reasons.map(({ text }) => text).join(" ")}`,
          },
        ]
      : []),
  ];
}

function observationCell({ observation, earlier, ...check }: RecordCheck, timeZone: string): TableCell {
  if (!observation) return { text: "none", color: soft };
  const uncertainty = uncertaintyWords({ observation, earlier, ...check });
  const under: string[] = [];
  if (uncertainty) under.push(uncertainty);
  if (observation.instrument) {
    const { name, serial, calibrationDue } = observation.instrument;
    under.push(`${name}, no. ${serial}, calibrated until ${dayText(calibrationDue)}`);
  }
  if (observation.conditions !== "") under.push(observation.conditions);
  if (observation.reason)
    under.push(`${observation.corrects ? "Corrected, because" : "Because"}: ${observation.reason}`);
  if (observation.note) under.push(observation.note);
  under.push(`${observation.by}, ${momentWords(observation.at, timeZone)}`);
  if (observation.carriedOver) {
    const { by, at } = observation.carriedOver;
    under.push(`Of revision ${observation.revision}, carried over by ${by}, ${momentWords(at, timeZone)}`);
  }
  if (earlier.length > 0) {
    under.push(`Before that: ${earlier.map((each) => observationWords(each)).join("; ")}`);
  }
  return { text: observationWords(observation), weight: "bold", under: under.map((text) => ({ text })) };
}

function verdictLines(check: RecordCheck): NonNullable<TableCell["under"]> {
  return [{ text: check.because }];
}
