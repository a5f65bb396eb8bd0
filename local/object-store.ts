import { createHash } from "node:crypto";
import { createServer, IncomingMessage, type ServerResponse } from "node:http";
import { mkdirSync } from "node:fs";
import S3rver from "s3rver";
import { checkSignature, type S3Credentials } from "./s3-signature";

export interface ObjectStoreOptions extends S3Credentials {
  /** Objects are kept below it, a folder a bucket. */
  folder: string;
  /** Made at the start when it isn't there. */
  bucket: string;
  port: number;
}

/** What a signed body may weigh: it is held in memory until its hash is known to be right. */
const LARGEST_HASHED_BODY = 128 * 1024 * 1024;
const EMPTY_HASH = createHash("sha256").digest("hex");

/**
 * A local S3 for development and tests, spoken to over HTTP as the real one. s3rver keeps the objects but checks no
 * signature, so this front does, before s3rver sees the request.
 */
export async function startObjectStore(
  options: ObjectStoreOptions,
): Promise<{ port: number; close(): Promise<void> }> {
  mkdirSync(options.folder, { recursive: true });
  const store = new S3rver({
    directory: options.folder,
    silent: true,
    vhostBuckets: false,
    configureBuckets: [],
  });
  await store.store.putBucket(options.bucket);
  const behind = store.callback();

  const server = createServer((request, response) => {
    void answer(request, response, options, behind).catch((error: unknown) => {
      console.error(error);
      if (!response.headersSent)
        refuse(request, response, 500, "InternalError", "The local object store failed.");
      else response.destroy();
    });
  });
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(options.port, "127.0.0.1", resolve);
  });
  return {
    port: options.port,
    close: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

async function answer(
  request: IncomingMessage,
  response: ServerResponse,
  known: S3Credentials,
  behind: (request: IncomingMessage, response: ServerResponse) => void,
): Promise<void> {
  const headers = Object.fromEntries(
    Object.entries(request.headers).map(([name, value]) => [
      name,
      Array.isArray(value) ? value.join(",") : (value ?? ""),
    ]),
  );
  const target = request.url ?? "/";
  const verdict = await checkSignature(
    { method: request.method ?? "GET", target, headers },
    known,
    new Date(),
  );
  if (!verdict.ok) return refuse(request, response, verdict.status, verdict.code, verdict.message);

  if (
    verdict.by === "link" ||
    verdict.payloadHash === "UNSIGNED-PAYLOAD" ||
    verdict.payloadHash === EMPTY_HASH
  ) {
    vouch(request);
    behind(request, response);
    return;
  }
  if (!/^[0-9a-f]{64}$/.test(verdict.payloadHash)) {
    // s3rver would store the framing of a chunk-signed body inside the object, silently.
    const message =
      "Bodies signed in chunks are not supported here: set requestChecksumCalculation to WHEN_REQUIRED.";
    return refuse(request, response, 501, "NotImplemented", message);
  }
  const body = await readWhole(request);
  if (body === null) return refuse(request, response, 400, "EntityTooLarge", "The signed body is too large.");
  if (createHash("sha256").update(body).digest("hex") !== verdict.payloadHash) {
    const message = "The body's SHA-256 is not the signed one.";
    return refuse(request, response, 400, "XAmzContentSHA256Mismatch", message);
  }
  const checked = new IncomingMessage(request.socket);
  Object.assign(checked, { method: request.method, url: request.url, headers: request.headers });
  // Otherwise the stream takes the end of its (already read) body for a broken connection, and closes it.
  checked.complete = true;
  checked.push(body);
  checked.push(null);
  vouch(checked);
  behind(checked, response);
}

/** Writes the request as s3rver's one built-in account would send it: our signature has been checked and is done with. */
function vouch(request: IncomingMessage): void {
  const [path = "/", query = ""] = (request.url ?? "/").split("?");
  const rest = query.split("&").filter((part) => part !== "" && !/^x-amz-/i.test(part));
  request.url = rest.length === 0 ? path : `${path}?${rest.join("&")}`;
  const now = new Date().toISOString().replace(/[-:]|\.\d+/g, "");
  request.headers.authorization = `AWS4-HMAC-SHA256 Credential=S3RVER/${now.slice(0, 8)}/local/s3/aws4_request, SignedHeaders=host, Signature=0`;
  request.headers["x-amz-date"] = now;
  request.headers["x-amz-content-sha256"] = "UNSIGNED-PAYLOAD";
}

async function readWhole(request: IncomingMessage): Promise<Buffer | null> {
  const chunks: Buffer[] = [];
  let size = 0;
  for await (const chunk of request) {
    size += chunk.length;
    if (size > LARGEST_HASHED_BODY) return null;
    chunks.push(chunk);
  }
  return Buffer.concat(chunks);
}

function refuse(
  request: IncomingMessage,
  response: ServerResponse,
  status: number,
  code: string,
  message: string,
): void {
  const body = `<?xml version="1.0" encoding="UTF-8"?>\n<Error><Code>${code}</Code><Message>${escapeXml(message)}</Message></Error>`;
  // The body is not read; without this a client that keeps sending would hold the connection.
  response.writeHead(status, { "content-type": "application/xml", connection: "close" });
  response.end(request.method === "HEAD" ? undefined : body);
  request.resume();
}

function escapeXml(text: string): string {
  return text.replace(/[<>&]/g, (sign) => `&#${sign.charCodeAt(0)};`);
}
