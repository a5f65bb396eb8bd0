import type { Request, Response } from "express";

const TITLES: Record<number, string> = {
  403: "Refused",
  411: "Length required",
  413: "Too large",
  429: "Too many requests",
  500: "Something went wrong",
  503: "Not available just now",
};

/**
 * Answers before (or instead of) a page: Problem Details (RFC 9457) for the API, bare text for a page's data request,
 * whose error boundary shows it, and otherwise a small page that needs nothing else to work.
 */
export function answerPlainly(request: Request, response: Response, status: number, detail: string): void {
  const title = TITLES[status] ?? "Error";
  response.status(status).set("Cache-Control", "no-store");
  if (request.path.startsWith("/api/") || request.accepts(["html", "json"]) === "json") {
    response
      .type("application/problem+json")
      .send(JSON.stringify({ type: "about:blank", title, status, detail }));
  } else if (request.path.endsWith(".data")) {
    response.type("text/plain").send(detail);
  } else {
    response.type("text/html").send(plainPage(title, detail, status === 503 && request.method === "GET"));
  }
}

/** `again`: the page tries once more by itself after some seconds. */
export function plainPage(title: string, detail: string, again = false): string {
  const refresh = again ? '<meta http-equiv="refresh" content="5">' : "";
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width">${refresh}
<meta name="color-scheme" content="light dark"><title>${escapeHtml(title)} · Mainsgate</title></head>
<body><main><h1>${escapeHtml(title)}</h1><p>${escapeHtml(detail)}</p><p><a href="/">To the start page</a></p></main></body></html>`;
}

function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);
}
