import { timingSafeEqual } from "node:crypto";
import { Sha256 } from "@aws-crypto/sha256-js";
import { SignatureV4 } from "@smithy/signature-v4";

/** A request as it stands on the wire, before anything is decoded. */
export interface WireRequest {
  method: string;
  /** Path and query, still percent-encoded. */
  target: string;
  /** Names in lower case. */
  headers: Record<string, string>;
}

export interface S3Credentials {
  accessKeyId: string;
  secretAccessKey: string;
  region: string;
}

export type SignatureVerdict =
  | { ok: true; by: "header"; payloadHash: string }
  | { ok: true; by: "link" }
  | { ok: false; status: 400 | 403; code: string; message: string };

const ALGORITHM = "AWS4-HMAC-SHA256";
/** AWS allows this much between the clocks ("RequestTimeTooSkewed"). */
const CLOCK_SKEW_MS = 15 * 60_000;
const LONGEST_LINK_SECONDS = 7 * 24 * 3600;
const UNSIGNED_PAYLOAD = "UNSIGNED-PAYLOAD";
/** Query parameters that the signer writes itself. */
const SIGNER_PARAMETERS = new Set([
  "X-Amz-Algorithm",
  "X-Amz-Credential",
  "X-Amz-Date",
  "X-Amz-Expires",
  "X-Amz-SignedHeaders",
  "X-Amz-Signature",
]);

/**
 * Checks a request's AWS Signature Version 4, in its Authorization header or in its query (a presigned link), by
 * signing what arrived with our own key and comparing. Source: AWS, "Authenticating Requests (AWS Signature Version
 * 4)", Amazon S3 API Reference; rules from memory, the signing itself by @smithy/signature-v4.
 */
export async function checkSignature(
  request: WireRequest,
  known: S3Credentials,
  now: Date,
): Promise<SignatureVerdict> {
  const { path, query } = splitTarget(request.target);
  if (query === null) return refuse(400, "InvalidURI", "The query can't be decoded.");
  if (request.headers.authorization !== undefined) return checkHeader(request, path, query, known, now);
  if ("X-Amz-Signature" in query) return checkLink(request, path, query, known, now);
  return refuse(403, "AccessDenied", "The request is not signed.");
}

async function checkHeader(
  request: WireRequest,
  path: string,
  query: Query,
  known: S3Credentials,
  now: Date,
): Promise<SignatureVerdict> {
  const match =
    /^AWS4-HMAC-SHA256 Credential=([^,\s]+),\s*SignedHeaders=([^,\s]+),\s*Signature=([0-9a-f]{64})$/.exec(
      request.headers.authorization ?? "",
    );
  const [, credential, signedList, signature] = match ?? [];
  if (credential === undefined || signedList === undefined || signature === undefined) {
    return refuse(400, "AuthorizationHeaderMalformed", "The Authorization header is not a SigV4 one.");
  }
  const signingDate = parseAmzDate(request.headers["x-amz-date"]);
  if (signingDate === null) return refuse(403, "AccessDenied", "x-amz-date is missing or malformed.");
  if (Math.abs(now.getTime() - signingDate.getTime()) > CLOCK_SKEW_MS) {
    return refuse(403, "RequestTimeTooSkewed", "The request's time is too far from the server's.");
  }
  const wrongScope = checkScope(credential, signingDate, known);
  if (wrongScope !== null) return wrongScope;
  const payloadHash = request.headers["x-amz-content-sha256"];
  if (payloadHash === undefined) return refuse(400, "InvalidRequest", "x-amz-content-sha256 is missing.");
  const signed = signedList.split(";");
  const unsigned = Object.keys(request.headers).filter(
    (name) => (name === "host" || name.startsWith("x-amz-")) && !signed.includes(name),
  );
  if (unsigned.length > 0)
    return refuse(403, "AccessDenied", `Headers that must be signed: ${unsigned.join(", ")}.`);

  const resigned = await signer(known).sign(
    { ...wire(request, path, query), headers: pick(request.headers, signed) },
    { signingDate, signableHeaders: new Set(signed) },
  );
  const expected = /Signature=([0-9a-f]{64})$/.exec(resigned.headers.authorization ?? "")?.[1];
  return sameSignature(expected, signature) ? { ok: true, by: "header", payloadHash } : mismatch();
}

async function checkLink(
  request: WireRequest,
  path: string,
  query: Query,
  known: S3Credentials,
  now: Date,
): Promise<SignatureVerdict> {
  const parameter = (name: string) => (typeof query[name] === "string" ? query[name] : "");
  if (parameter("X-Amz-Algorithm") !== ALGORITHM) {
    return refuse(400, "AuthorizationQueryParametersError", `X-Amz-Algorithm must be ${ALGORITHM}.`);
  }
  const signingDate = parseAmzDate(parameter("X-Amz-Date"));
  const expiresIn = Number(parameter("X-Amz-Expires"));
  if (
    signingDate === null ||
    !Number.isInteger(expiresIn) ||
    expiresIn < 1 ||
    expiresIn > LONGEST_LINK_SECONDS
  ) {
    return refuse(
      400,
      "AuthorizationQueryParametersError",
      "X-Amz-Date or X-Amz-Expires is missing or malformed.",
    );
  }
  if (signingDate.getTime() > now.getTime() + CLOCK_SKEW_MS) {
    return refuse(403, "AccessDenied", "The link is not valid yet.");
  }
  if (signingDate.getTime() + expiresIn * 1000 < now.getTime()) {
    return refuse(403, "AccessDenied", "Request has expired");
  }
  const wrongScope = checkScope(parameter("X-Amz-Credential"), signingDate, known);
  if (wrongScope !== null) return wrongScope;
  const signed = parameter("X-Amz-SignedHeaders").split(";");
  if (!signed.includes("host")) return refuse(403, "AccessDenied", "The host header must be signed.");

  const rest = Object.fromEntries(Object.entries(query).filter(([name]) => !SIGNER_PARAMETERS.has(name)));
  const resigned = await signer(known).presign(
    {
      ...wire(request, path, rest),
      // A link never covers the body: S3 signs this constant in the hash's place.
      headers: { ...pick(request.headers, signed), "x-amz-content-sha256": UNSIGNED_PAYLOAD },
    },
    {
      signingDate,
      expiresIn,
      signableHeaders: new Set(signed),
      unsignableHeaders: new Set(["x-amz-content-sha256"].filter((name) => !signed.includes(name))),
      unhoistableHeaders: new Set([...signed, "x-amz-content-sha256"]),
    },
  );
  const expected = resigned.query?.["X-Amz-Signature"];
  return sameSignature(expected, parameter("X-Amz-Signature")) ? { ok: true, by: "link" } : mismatch();
}

function signer(known: S3Credentials): SignatureV4 {
  return new SignatureV4({
    credentials: { accessKeyId: known.accessKeyId, secretAccessKey: known.secretAccessKey },
    region: known.region,
    service: "s3",
    sha256: Sha256,
    // S3 signs the path as it was sent, and without a second encoding.
    uriEscapePath: false,
    applyChecksum: false,
  });
}

function wire(request: WireRequest, path: string, query: Query) {
  return { method: request.method, protocol: "http:", hostname: "127.0.0.1", path, query, headers: {} };
}

type Query = Record<string, string | string[]>;

/** Splits path from query; null for a query whose escapes are broken, or with a bare plus (two readings). */
function splitTarget(target: string): { path: string; query: Query | null } {
  const at = target.indexOf("?");
  if (at < 0) return { path: target, query: {} };
  const path = target.slice(0, at);
  const query: Query = {};
  for (const part of target.slice(at + 1).split("&")) {
    if (part === "") continue;
    if (part.includes("+")) return { path, query: null };
    const equals = part.indexOf("=");
    try {
      const name = decodeURIComponent(equals < 0 ? part : part.slice(0, equals));
      const value = equals < 0 ? "" : decodeURIComponent(part.slice(equals + 1));
      const before = query[name];
      query[name] = before === undefined ? value : [...(Array.isArray(before) ? before : [before]), value];
    } catch {
      return { path, query: null };
    }
  }
  return { path, query };
}

/** The credential's scope is `key/yyyymmdd/region/s3/aws4_request`. */
function checkScope(credential: string, signingDate: Date, known: S3Credentials): SignatureVerdict | null {
  const [key, day, region, service, end] = credential.split("/");
  if (key !== known.accessKeyId)
    return refuse(403, "InvalidAccessKeyId", "The access key is not known here.");
  const expectedDay = signingDate.toISOString().slice(0, 10).replaceAll("-", "");
  if (day !== expectedDay || region !== known.region || service !== "s3" || end !== "aws4_request") {
    return refuse(400, "AuthorizationHeaderMalformed", "The credential's scope is wrong.");
  }
  return null;
}

/** Reads yyyymmddThhmmssZ. */
function parseAmzDate(text: string | undefined): Date | null {
  const match = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(text ?? "");
  if (match === null) return null;
  const [, year, month, day, hour, minute, second] = match;
  const date = new Date(`${year}-${month}-${day}T${hour}:${minute}:${second}Z`);
  return Number.isNaN(date.getTime()) ? null : date;
}

function pick(headers: Record<string, string>, names: readonly string[]): Record<string, string> {
  return Object.fromEntries(
    names.flatMap((name) => (headers[name] === undefined ? [] : [[name, headers[name]]])),
  );
}

function sameSignature(expected: unknown, given: string): boolean {
  if (typeof expected !== "string" || expected.length !== given.length) return false;
  return timingSafeEqual(Buffer.from(expected), Buffer.from(given));
}

function mismatch(): SignatureVerdict {
  return refuse(403, "SignatureDoesNotMatch", "The signature does not match the request and the secret key.");
}

function refuse(status: 400 | 403, code: string, message: string): SignatureVerdict {
  return { ok: false, status, code, message };
}
