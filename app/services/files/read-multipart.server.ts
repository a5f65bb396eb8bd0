import busboy from "busboy";
import { PassThrough, Readable, Transform } from "node:stream";
import { pipeline } from "node:stream/promises";
import type { ReadableStream as NodeWebStream } from "node:stream/web";
import { InvalidInputError } from "~/services/errors";
import { PHOTO_BYTES, REQUEST_BYTES } from "./upload-limits";

export interface IncomingFile {
  name: string;
  /** Must be read to its end or destroyed; fails with InvalidInputError (413) when the file is too large. */
  stream: Readable;
  /** The form's other fields; those that the browser sent before the file. */
  fields: Readonly<Record<string, string>>;
}

/**
 * Reads a multipart form with one file, as a stream: `onFile` gets the file while it is still arriving. However that
 * ends, the request is read to its end, so that the sender hears the answer.
 *
 * @throws InvalidInputError: no multipart form (415), no file, several or an interrupted one (400), too large (413); and
 *   whatever `onFile` throws
 */
export async function readMultipart<T>(
  request: Request,
  onFile: (file: IncomingFile) => Promise<T>,
): Promise<T> {
  const parser = openParser(request);
  const fields: Record<string, string> = {};
  let work: Promise<T> | undefined;
  let excess = false;

  parser.on("field", (name, value) => {
    fields[name] = value;
  });
  parser.on("file", (fieldName, file, info) => {
    // Busboy's own stream is never destroyed: the request would not end. The gate is, and the rest runs off.
    const gate = new PassThrough();
    gate.on("error", () => undefined);
    gate.on("close", () => {
      file.unpipe(gate);
      file.resume();
    });
    file.on("limit", () => gate.destroy(tooLarge(PHOTO_BYTES)));
    file.on("error", (error) => gate.destroy(error));
    file.pipe(gate);
    if (fieldName !== "file" || work) {
      excess = true;
      return void gate.destroy();
    }
    work = onFile({ name: info.filename ?? "", stream: gate, fields }).finally(() => gate.destroy());
    // The outcome is awaited below, after the request has been read; until then nobody else listens.
    work.catch(() => undefined);
  });

  try {
    if (!request.body) throw new Error("The request has no body.");
    await pipeline(Readable.fromWeb(request.body as NodeWebStream), stopAfter(REQUEST_BYTES), parser);
  } catch (error) {
    await work?.catch(() => undefined);
    if (error instanceof InvalidInputError) throw error;
    throw new InvalidInputError(
      "file",
      "The upload ended before the whole file had arrived. Please send it again.",
      400,
    );
  }
  if (!work) throw new InvalidInputError("file", "Choose a file first.", 400);
  if (excess) {
    await work.catch(() => undefined);
    throw new InvalidInputError("file", "Send one file at a time. Nothing was kept.", 400);
  }
  return work;
}

function openParser(request: Request): busboy.Busboy {
  const contentType = request.headers.get("Content-Type") ?? "";
  if (!/^multipart\/form-data;.*boundary=/i.test(contentType)) {
    throw new InvalidInputError("file", "Files are sent as multipart/form-data.", 415);
  }
  try {
    return busboy({
      headers: { "content-type": contentType },
      defParamCharset: "utf8",
      limits: {
        files: 2,
        fileSize: PHOTO_BYTES,
        fields: 10,
        fieldSize: 4_000,
        fieldNameSize: 100,
        parts: 13,
      },
    });
  } catch {
    throw new InvalidInputError("file", "The upload can't be read: its form is broken.", 400);
  }
}

function stopAfter(limit: number): Transform {
  let seen = 0;
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      seen += chunk.length;
      if (seen > limit) done(tooLarge(PHOTO_BYTES));
      else done(null, chunk);
    },
  });
}

/** The refusal of a file that weighs more than `limit`. */
export function tooLarge(limit: number): InvalidInputError {
  return new InvalidInputError("file", `The file is too large: at most ${limit / 1024 / 1024} MB.`, 413);
}
