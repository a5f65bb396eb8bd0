import { expect, test } from "vitest";
import { REQUEST_BYTES } from "~/services/files/upload-limits";
import { FORM_BYTES, refusalByBody } from "./body-limit";

const form = { path: "/sign-in", contentLength: "120", transferEncoding: null };
const upload = { ...form, path: "/api/w/canal-street/units/7/files" };

test("lets an ordinary form pass, and a request without a body", () => {
  expect(refusalByBody(form)).toBeNull();
  expect(refusalByBody({ ...form, contentLength: String(FORM_BYTES) })).toBeNull();
  expect(refusalByBody({ ...form, contentLength: null })).toBeNull();
});

test("refuses a form that is too large or says no length", () => {
  expect(refusalByBody({ ...form, contentLength: String(FORM_BYTES + 1) })?.status).toBe(413);
  expect(refusalByBody({ ...form, contentLength: "nonsense" })?.status).toBe(413);
  expect(refusalByBody({ ...form, contentLength: null, transferEncoding: "chunked" })?.status).toBe(411);
});

test("photos may weigh more, but only where they are sent", () => {
  expect(refusalByBody({ ...upload, contentLength: String(REQUEST_BYTES) })).toBeNull();
  expect(refusalByBody({ ...upload, contentLength: String(REQUEST_BYTES + 1) })?.status).toBe(413);
  const elsewhere = { ...upload, path: `${upload.path}/../map`, contentLength: String(REQUEST_BYTES) };
  expect(refusalByBody(elsewhere)?.status).toBe(413);
});
