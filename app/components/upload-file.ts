import { problemDetail } from "./api-request";

/** What the API answers for a file that it has kept; more fields than these travel along. */
export interface UploadedFile {
  id: number;
  kind: "photo" | "drawing";
  caption: string;
  originalName: string;
}

export type UploadResult =
  | { ok: true; file: UploadedFile }
  /** `again`: the same file may go through at another try (no connection, store away). */
  | { ok: false; message: string; again: boolean };

export interface Upload {
  result: Promise<UploadResult>;
  abort(): void;
}

/**
 * Sends one file to the API with XMLHttpRequest, since fetch tells no progress of an upload.
 *
 * @param fields go before the file, as the server needs them before its bytes
 * @param onProgress share from 0 to 1
 */
export function uploadFile(
  url: string,
  fields: Readonly<Record<string, string>>,
  file: File,
  onProgress: (share: number) => void,
): Upload {
  const form = new FormData();
  for (const [name, value] of Object.entries(fields)) form.append(name, value);
  form.append("file", file);

  const request = new XMLHttpRequest();
  const result = new Promise<UploadResult>((resolve) => {
    request.upload.addEventListener("progress", (event) => {
      if (event.lengthComputable && event.total > 0) onProgress(event.loaded / event.total);
    });
    request.addEventListener("load", () => resolve(readAnswer(request.status, request.responseText)));
    request.addEventListener("error", () =>
      resolve({ ok: false, message: "The connection broke off. The file is still here.", again: true }),
    );
    request.addEventListener("abort", () => resolve({ ok: false, message: "Stopped.", again: true }));
    request.open("POST", url);
    request.setRequestHeader("Accept", "application/json");
    request.send(form);
  });
  return { result, abort: () => request.abort() };
}

function readAnswer(status: number, text: string): UploadResult {
  const answer = parse(text);
  if (status === 201 && isUploadedFile(answer)) return { ok: true, file: answer };
  return {
    ok: false,
    message: problemDetail(answer),
    again: status === 0 || status === 409 || status === 429 || status >= 500,
  };
}

function parse(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

function isUploadedFile(value: unknown): value is UploadedFile {
  return (
    typeof value === "object" &&
    value !== null &&
    "id" in value &&
    typeof value.id === "number" &&
    "kind" in value &&
    (value.kind === "photo" || value.kind === "drawing")
  );
}
