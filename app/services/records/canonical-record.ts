import { createHash } from "node:crypto";
import canonicalize from "canonicalize";
import { recordSchema, type UnitRecord } from "./record-format";

/** A record as RFC 8785 canonical JSON, and the SHA-256 (hex) over its UTF-8 bytes. Checks the shape first. */
export function canonicalRecord(record: UnitRecord): { json: string; sha256: string } {
  const json = canonicalize(recordSchema.parse(record));
  if (json === undefined) throw new TypeError("The record can't be put into canonical form.");
  return { json, sha256: sha256Of(json) };
}

/** Hex SHA-256 of a text's UTF-8 bytes, or of bytes. */
export function sha256Of(content: string | Uint8Array): string {
  return createHash("sha256").update(content).digest("hex");
}

/** Reads a stored record back. @throws ZodError when it is none */
export function parseRecord(json: string): UnitRecord {
  const value: unknown = JSON.parse(json);
  return recordSchema.parse(value);
}
