export type ApiResult =
  | { ok: true; data: unknown }
  /** `status` 0: the server was not reached. `data`: the Problem Details, where the answer was one. */
  | { ok: false; status: number; message: string; data: unknown };

/**
 * Asks the product's own API. Never throws and never takes the page away, as a fetcher would when the server can't be
 * reached: what was typed stays where it is.
 */
export async function apiRequest(
  url: string,
  request:
    | { method: "GET" }
    | { method: "POST" | "PUT"; json: unknown }
    | { method: "POST"; form: Record<string, string> },
  signal?: AbortSignal,
): Promise<ApiResult> {
  try {
    const response = await fetch(url, { ...initOf(request), signal });
    const data: unknown = await response.json().catch(() => null);
    if (response.ok) return { ok: true, data };
    return { ok: false, status: response.status, message: problemDetail(data), data };
  } catch {
    return { ok: false, status: 0, message: "The server can't be reached.", data: null };
  }
}

/** The sentence of a Problem Details answer. */
export function problemDetail(answer: unknown): string {
  return typeof answer === "object" &&
    answer !== null &&
    "detail" in answer &&
    typeof answer.detail === "string"
    ? answer.detail
    : "The server could not do this.";
}

function initOf(request: Parameters<typeof apiRequest>[1]): RequestInit {
  const headers = { Accept: "application/json" };
  if ("json" in request) {
    return {
      method: request.method,
      headers: { ...headers, "Content-Type": "application/json" },
      body: JSON.stringify(request.json),
    };
  }
  if ("form" in request) {
    return { method: request.method, headers, body: new URLSearchParams(request.form) };
  }
  return { method: request.method, headers };
}
