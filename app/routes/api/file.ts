import { Readable } from "node:stream";
import { problem, problemResponse } from "~/middleware/answers.server";
import { authorise } from "~/middleware/authorise.server";
import { ServiceError } from "~/services/errors";
import { findFile } from "~/services/files/open-file.server";
import type { Route } from "./+types/file";

/** GET: the bytes of a photo ("full" or "thumb") or of a PDF ("full", always as a download). */
export async function loader({ request, params, context }: Route.LoaderArgs) {
  const services = authorise(context, "unit.read");
  const id = Number(params.file);
  if (!Number.isSafeInteger(id) || id < 1 || (params.size !== "full" && params.size !== "thumb")) {
    return problemResponse(404, "The file was not found in this workshop.");
  }
  try {
    const file = await findFile(services, id, params.size);
    const headers = new Headers({
      ETag: file.etag,
      // The bytes behind an id never change; "private", since only members of the workshop may see them.
      "Cache-Control": "private, max-age=86400, immutable",
      "Content-Type": file.contentType,
      "Content-Security-Policy": "default-src 'none'; sandbox",
      "Content-Disposition": disposition(
        file.kind === "drawing" ? "attachment" : "inline",
        file.originalName,
      ),
    });
    if (request.headers.get("If-None-Match") === file.etag)
      return new Response(null, { status: 304, headers });
    const { body, bytes } = await file.open();
    if (bytes !== undefined) headers.set("Content-Length", String(bytes));
    return new Response(Readable.toWeb(body) as ReadableStream<Uint8Array>, { headers });
  } catch (error) {
    if (error instanceof ServiceError) return problem(error);
    throw error;
  }
}

/** RFC 6266: a plain name for old clients, the real one in UTF-8 beside it. */
function disposition(kind: "inline" | "attachment", name: string): string {
  const plain = name.replace(/[^\w .()-]/g, "_") || "file";
  return `${kind}; filename="${plain}"; filename*=UTF-8''${encodeURIComponent(name || "file").replace(/['()*]/g, (sign) => `%${sign.charCodeAt(0).toString(16)}`)}`;
}
