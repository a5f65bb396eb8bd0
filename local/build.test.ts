import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, onTestFinished, test } from "vitest";
import { sourceHash } from "./build";

function makeCheckout(): { root: string; write(file: string, content: string): void } {
  const root = mkdtempSync(join(tmpdir(), "mg-build-"));
  onTestFinished(() => rmSync(root, { recursive: true }));
  const write = (file: string, content: string) => {
    mkdirSync(join(root, file, ".."), { recursive: true });
    writeFileSync(join(root, file), content);
  };
  write("app/root.tsx", "one");
  write("app/engine/check.ts", "two");
  write("package-lock.json", "{}");
  return { root, write };
}

test("the same content gives the same hash, whenever it was written", () => {
  expect(sourceHash(makeCheckout().root)).toBe(sourceHash(makeCheckout().root));
});

test.each([
  ["app/root.tsx", "changed"],
  ["app/engine/check.ts", "changed"],
  ["app/engine/added.ts", ""],
  ["public/logo.svg", "<svg/>"],
  ["package-lock.json", "changed"],
  ["vite.config.ts", "changed"],
])("a build is stale when %s changes", (file, content) => {
  const { root, write } = makeCheckout();
  const before = sourceHash(root);
  write(file, content);
  expect(sourceHash(root)).not.toBe(before);
});

test("tests and documents make no build stale", () => {
  const { root, write } = makeCheckout();
  const before = sourceHash(root);
  write("app/engine/check.test.ts", "a test");
  write("README.md", "words");
  write("tests/e2e/x.test.ts", "a test");
  expect(sourceHash(root)).toBe(before);
});
