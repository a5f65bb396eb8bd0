import { AFRelationship, PDFDocument, PDFHexString } from "pdf-lib";
import type { UnitRecord } from "~/services/records/record-format";
import { drawChecks } from "./record-checks.server";
import { drawCover } from "./record-cover.server";
import {
  drawFindings,
  drawInstruments,
  drawMapSection,
  drawProof,
  drawStatements,
} from "./record-sections.server";
import { drawPhotos, type PrintedPhoto } from "./record-photos.server";
import { startPaper } from "./paper.server";
import { loadTypeface } from "./typeface.server";

export interface RecordPdfInput {
  record: UnitRecord;
  /** The stored canonical JSON, attached byte for byte. */
  canonicalJson: string;
  sha256: string;
  /** The drawn signature; null when it was typed. */
  signaturePng: Uint8Array | null;
  /** In the record's order, sized for print. */
  photos: readonly PrintedPhoto[];
}

/**
 * Sets a record as a PDF. Nothing but the input goes in: the same record gives the same bytes, however often it is made.
 */
export async function renderRecordPdf(input: RecordPdfInput): Promise<Uint8Array> {
  const { record, sha256 } = input;
  const decidedAt = new Date(record.decision.at);
  const document = await PDFDocument.create({ updateMetadata: false });
  const type = await loadTypeface(document);
  const paper = startPaper(document, type);

  await drawCover(paper, input);
  drawMapSection(paper, record);
  drawStatements(paper, record);
  drawChecks(paper, record);
  drawFindings(paper, record);
  await drawPhotos(paper, record, input.photos);
  drawInstruments(paper, record);
  drawProof(paper, input);
  paper.finish({
    left: record.workshop.demo ? `${record.workshop.name} · demonstration` : record.workshop.name,
    middle: `Unit ${record.unit.number} · revision ${record.unit.revision}`,
    hash: sha256,
  });

  const decision = record.decision.kind === "signed" ? "signed" : "refused";
  document.setTitle(`Unit ${record.unit.number}, ${record.unit.name}: ${decision}`, {
    showInWindowTitleBar: true,
  });
  document.setAuthor(record.decision.signer.licence.holder);
  document.setSubject(`Record of examination, SHA-256 ${sha256}`);
  document.setProducer("Mainsgate");
  document.setCreator("Mainsgate");
  document.setLanguage("en-GB");
  document.setCreationDate(decidedAt);
  document.setModificationDate(decidedAt);

  const dates = { creationDate: decidedAt, modificationDate: decidedAt };
  await document.attach(new TextEncoder().encode(input.canonicalJson), "record.json", {
    ...dates,
    mimeType: "application/json",
    description: "The record as canonical JSON (RFC 8785); its SHA-256 is printed on every sheet.",
    afRelationship: AFRelationship.Source,
  });
  if (input.signaturePng) {
    await document.attach(input.signaturePng, "signature.png", {
      ...dates,
      mimeType: "image/png",
      description: "The drawn signature; its SHA-256 is in the record.",
      afRelationship: AFRelationship.Supplement,
    });
  }
  const id = PDFHexString.of(sha256.slice(0, 32));
  document.context.trailerInfo.ID = document.context.obj([id, id]);
  return document.save({ useObjectStreams: false, addDefaultPage: false });
}
