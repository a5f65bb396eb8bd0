import { expect, test } from "vitest";
import { refusalByOrigin } from "./origin-check";

const ours = "https://mainsgate.workshop.example";
const request = (change: Partial<Parameters<typeof refusalByOrigin>[0]>) => ({
  method: "POST",
  secFetchSite: null,
  origin: null,
  ownOrigins: [ours, "http://127.0.0.1:3000"],
  ...change,
});

// Meaning of the header's four values: W3C Fetch Metadata Request Headers, "The Sec-Fetch-Site HTTP Request Header".
test.each([
  ["same-origin", true],
  ["none", true],
  ["same-site", false],
  ["cross-site", false],
  ["something new", false],
])("Sec-Fetch-Site: %s may pass: %s", (secFetchSite, passes) => {
  expect(refusalByOrigin(request({ secFetchSite, origin: ours })) === null).toBe(passes);
});

test("Sec-Fetch-Site goes before an Origin that looks like ours", () => {
  expect(refusalByOrigin(request({ secFetchSite: "cross-site", origin: ours }))).not.toBeNull();
});

test.each([
  [ours, true],
  ["http://127.0.0.1:3000", true],
  ["https://evil.example", false],
  ["http://mainsgate.workshop.example", false],
  ["https://mainsgate.workshop.example.evil.example", false],
  ["https://mainsgate.workshop.example:444", false],
  ["null", false],
  ["", false],
])("without Sec-Fetch-Site, Origin: %s may pass: %s", (origin, passes) => {
  expect(refusalByOrigin(request({ origin })) === null).toBe(passes);
});

test("a change that says nothing of where it comes from is refused", () => {
  for (const method of ["POST", "PUT", "PATCH", "DELETE", "UNKNOWN"]) {
    expect(refusalByOrigin(request({ method })), method).not.toBeNull();
  }
});

test("reading is free from everywhere", () => {
  for (const method of ["GET", "HEAD", "OPTIONS"]) {
    expect(
      refusalByOrigin(request({ method, secFetchSite: "cross-site", origin: "https://evil.example" })),
    ).toBeNull();
  }
});
