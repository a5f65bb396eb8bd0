import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, onTestFinished, test } from "vitest";
import { findProgram, missingDebianPackages, npmPackagesAreCurrent } from "./packages.mjs";

type Lock = Record<string, { version?: string; optional?: boolean }>;

/** A checkout with a lock file and, unless null, what npm wrote after installing. */
function makeCheckout(lock: Lock, installed: Lock | null): string {
  const root = mkdtempSync(join(tmpdir(), "mg-packages-"));
  onTestFinished(() => rmSync(root, { recursive: true }));
  writeFileSync(join(root, "package-lock.json"), JSON.stringify({ packages: lock }));
  mkdirSync(join(root, "node_modules"));
  if (installed !== null) {
    writeFileSync(join(root, "node_modules/.package-lock.json"), JSON.stringify({ packages: installed }));
  }
  return root;
}

const lock: Lock = {
  "": { version: "0.1.0" },
  "node_modules/a": { version: "1.0.0" },
  "node_modules/for-another-system": { version: "2.0.0", optional: true },
};

test.each<[string, Lock | null, boolean]>([
  ["nothing, or an installation that was interrupted", null, false],
  [
    "what the lock asks for, without another system's optional part",
    { "node_modules/a": { version: "1.0.0" } },
    true,
  ],
  ["an older version", { "node_modules/a": { version: "0.9.0" } }, false],
  ["a package less", {}, false],
])("with %s installed, packages are current: %s", (_, installed, current) => {
  expect(npmPackagesAreCurrent(makeCheckout(lock, installed))).toBe(current);
});

test("programs are found in Debian's folders even when PATH lacks them", () => {
  expect(findProgram("apt-get", { path: "" })).toBe("/usr/bin/apt-get");
  expect(findProgram("no-such-program-of-ours")).toBeNull();
});

test("only what is missing is asked for", () => {
  const wanted = [
    { command: "apt-get", package: "apt" },
    { command: "no-such-program-of-ours", package: "no-such-package" },
  ];
  expect(missingDebianPackages(wanted)).toEqual(["no-such-package"]);
});
