import { Readable } from "node:stream";
import { problem, problemResponse } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { findRecord } from "~/services/archive/find-record.server";
import { ServiceError } from "~/services/errors";
import { objectStore } from "~/services/storage/object-store.server";
import type { Route } from "./+types/record";

/** GET: the record of a unit as the stored PDF ("pdf") or as the canonical JSON, byte for byte ("json"). */
export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "archive.read", params.unit);
  if (params.form !== "pdf" && params.form !== "json") {
    return problemResponse(404, "A record comes as pdf or json.");
  }
  try {
    const { canonicalJson, sha256, pdf } = await findRecord(services, unit);
    const name = `record-unit-${unit.number}-${sha256.slice(0, 8)}`;
    if (params.form === "json") {
      return new Response(canonicalJson, { headers: headersFor("application/json", `${name}.json`, sha256) });
    }
    if (!pdf.ready) {
      return problemResponse(404, "The PDF of this record is still being made. Try again in a moment.");
    }
    const { body } = await objectStore().get(pdf.key);
    const headers = headersFor("application/pdf", `${name}.pdf`, pdf.sha256);
    headers.set("Content-Length", String(pdf.bytes));
    return new Response(Readable.toWeb(body) as ReadableStream<Uint8Array>, { headers });
  } catch (error) {
    if (error instanceof ServiceError) return problem(error);
    throw error;
  }
}

function headersFor(contentType: string, fileName: string, hash: string): Headers {
  return new Headers({
    "Content-Type": contentType,
    "Content-Disposition": `attachment; filename="${fileName}"`,
    "X-Content-Type-Options": "nosniff",
    "Content-Security-Policy": "default-src 'none'; sandbox",
    "Cache-Control": "private, no-cache",
    ETag: `"${hash}"`,
  });
}
