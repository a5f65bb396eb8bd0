import { ServiceError, ThrottledError } from "~/services/errors";

/**
 * The answer that a page throws for a typed error of a service, so that the error page can say what happened.
 * Anything else is rethrown as it is: it is a defect, and the server answers 500.
 */
export function answerTo(error: unknown): Response {
  if (!(error instanceof ServiceError)) throw error;
  return refusal(error.status, error.message, retryHeader(error));
}

/**
 * A refusal in a sentence. A plain response, so that it also reaches the API's middleware as it is: a thrown `data()`
 * loses its words in a resource route.
 */
export function refusal(status: number, sentence: string, headers: Record<string, string> = {}): Response {
  return new Response(sentence, {
    status,
    headers: { "Content-Type": "text/plain; charset=utf-8", "Cache-Control": "no-store", ...headers },
  });
}

/** The same for the API: Problem Details (RFC 9457). */
export function problem(error: unknown): Response {
  if (!(error instanceof ServiceError)) throw error;
  return problemResponse(error.status, error.message, {
    ...("field" in error ? { field: error.field } : {}),
    ...("reasons" in error ? { reasons: error.reasons } : {}),
  });
}

/** A Problem Details answer with a title for the status, a detail in a sentence and extension members. */
export function problemResponse(
  status: number,
  detail: string,
  members: Record<string, unknown> = {},
): Response {
  return new Response(
    JSON.stringify({ type: "about:blank", title: titles[status] ?? "Error", status, detail, ...members }),
    {
      status,
      headers: { "Content-Type": "application/problem+json", "Cache-Control": "no-store" },
    },
  );
}

const titles: Record<number, string> = {
  400: "Bad request",
  401: "Not signed in",
  403: "Not allowed",
  404: "Not found",
  405: "Method not allowed",
  409: "Conflict",
  413: "Too large",
  415: "Unsupported type",
  422: "Can't be accepted",
  429: "Too many tries",
  503: "Not available",
};

function retryHeader(error: ServiceError): Record<string, string> {
  return error instanceof ThrottledError ? { "Retry-After": String(Math.ceil(error.retryAfterSeconds)) } : {};
}
