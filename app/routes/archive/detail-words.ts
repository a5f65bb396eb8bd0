/** What an entry of the trail tells beside its act, for people. Hashes and numbers stay as they were written. */
const names: Record<string, string> = {
  after: "Now",
  before: "Before",
  carried: "Answers carried over",
  check: "Check",
  corrects: "Corrects answer no.",
  file: "File no.",
  finding: "Finding no.",
  from: "From person no.",
  inspector: "Inspector, person no.",
  kind: "Kind of answer",
  mapSha256: "SHA-256 of the map",
  newRevision: "New revision",
  nextRevision: "Next revision",
  number: "Number",
  observation: "Answer no.",
  pdfSha256: "SHA-256 of the PDF",
  placeOfUse: "Place of use",
  predecessor: "Earlier version, unit",
  purpose: "Purpose",
  reason: "Reason",
  recordId: "Record no.",
  recordSha256: "SHA-256 of the record",
  revision: "Revision",
  severity: "Severity",
  sha256: "SHA-256",
  subject: "Belongs to",
  successor: "New version, unit",
  supersedes: "Takes the place of unit",
  textSha256: "SHA-256 of the text",
  to: "To person no.",
  told: "People told by mail",
  verdicts: "Checks by verdict",
};

/** One detail of a trail entry as a name and a value; an unknown key is told as it stands. */
export function detailWords([name, value]: [string, unknown]): { name: string; value: string } {
  return { name: names[name] ?? name, value: valueWords(value) };
}

function valueWords(value: unknown): string {
  if (typeof value === "string") return value;
  if (value === null || value === undefined) return "none";
  if (value === true) return "yes";
  if (value === false) return "no";
  if (Array.isArray(value)) {
    const between = value.some((each) => typeof each === "object") ? "; " : ", ";
    return value.length === 0 ? "none" : value.map(valueWords).join(between);
  }
  if (typeof value === "object") {
    const told = Object.entries(value).filter(([, each]) => each !== 0);
    if (told.length === 0) return "none";
    return told.map(([key, each]) => `${key.replaceAll("-", " ")} ${valueWords(each)}`).join(", ");
  }
  return JSON.stringify(value);
}
