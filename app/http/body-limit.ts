import { REQUEST_BYTES } from "~/services/files/upload-limits";

/** The most that a form or JSON may weigh: a drawn signature, a whole map or long texts fit twice over. */
export const FORM_BYTES = 2 * 1024 * 1024;

const UPLOADS = /^\/api\/w\/[^/]+\/units\/[^/]+\/files\/?$/;

/** What the body limit looks at. Header values as they came; null when absent. */
export interface RequestBody {
  path: string;
  contentLength: string | null;
  transferEncoding: string | null;
}

/**
 * Why a body must be refused before any of it is read, or null when it may pass. Forms are read into memory, also those
 * of people who are not signed in, so their length must be known beforehand; Node reads no more than was declared.
 */
export function refusalByBody({
  path,
  contentLength,
  transferEncoding,
}: RequestBody): { status: 411 | 413; detail: string } | null {
  if (contentLength === null) {
    if (transferEncoding === null) return null;
    return { status: 411, detail: "The request does not say how long it is, so nothing was changed." };
  }
  const most = UPLOADS.test(path) ? REQUEST_BYTES : FORM_BYTES;
  if (Number(contentLength) <= most) return null;
  const detail = `The request is too large: at most ${most / 1024 / 1024} MB. Nothing was changed.`;
  return { status: 413, detail };
}
