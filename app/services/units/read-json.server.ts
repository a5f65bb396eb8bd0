import { Readable } from "node:stream";
import type { ReadableStream as NodeWebStream } from "node:stream/web";
import type { z } from "zod";
import { InvalidInputError } from "~/services/errors";
import { describeIssue } from "~/engine/describe-issue";

/** The most that a JSON request may weigh: the largest map that the schema allows, and room to spare. */
const JSON_BYTES = 1024 * 1024;

/**
 * Reads a JSON body against a schema.
 *
 * @throws InvalidInputError: no JSON (400), too large (413), not of the schema (422, the field being a path)
 */
export async function readJson<T>(request: Request, schema: z.ZodType<T>): Promise<T> {
  const text = await readText(request);
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    throw new InvalidInputError("body", "The request's body is no valid JSON.", 400);
  }
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  throw new InvalidInputError(
    issue ? issue.path.join(".") : "body",
    issue ? describeIssue(issue, value) : "The request's body doesn't fit.",
  );
}

/** Counts what arrives, since a length that a sender declares is only a claim. */
async function readText(request: Request): Promise<string> {
  if (!request.body) return "";
  const chunks: Buffer[] = [];
  let seen = 0;
  const body: AsyncIterable<Buffer> = Readable.fromWeb(request.body as NodeWebStream);
  for await (const chunk of body) {
    seen += chunk.length;
    if (seen > JSON_BYTES)
      throw new InvalidInputError("body", "The request is too large: at most 1 MB.", 413);
    chunks.push(chunk);
  }
  return Buffer.concat(chunks).toString("utf8");
}
