import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { expect, test } from "vitest";
import { readForm } from "./read-form.server";

const routesFolder = join(import.meta.dirname, "../routes");

function post(body: BodyInit, contentType = "application/x-www-form-urlencoded"): Request {
  return new Request("http://mainsgate.test/sign-in", {
    method: "POST",
    body,
    headers: { "Content-Type": contentType },
  });
}

async function statusOf(request: Request): Promise<number> {
  try {
    await readForm(request);
    return 200;
  } catch (error) {
    if (error instanceof Response) return error.status;
    throw error;
  }
}

test("a form is read as it is", async () => {
  const form = await readForm(post("email=a%40b.example&checks=F1&checks=F2&roles[0]=builder&roles[200]=x"));
  expect([...form.entries()]).toEqual([
    ["email", "a@b.example"],
    ["checks", "F1"],
    ["checks", "F2"],
    ["roles[0]", "builder"],
    ["roles[200]", "x"],
  ]);
});

test("names that would build a huge, deep or poisoned object are refused", async () => {
  expect(await statusOf(post("a[99999999]=1&email=x&password=y"))).toBe(400);
  expect(await statusOf(post("a[201]=1"))).toBe(400);
  expect(await statusOf(post("a.b[3].201.c=1"))).toBe(400);
  expect(await statusOf(post(`${"a.".repeat(20_000)}a=1`))).toBe(400);
  expect(await statusOf(post("a.b.c.d.e.f=1"))).toBe(200);
  expect(await statusOf(post("a.b.c.d.e.f.g=1"))).toBe(400);
  expect(await statusOf(post("a[0][0][0][0][0][0]=1"))).toBe(400);
  expect(await statusOf(post(`${"n".repeat(201)}=1`))).toBe(400);
  expect(await statusOf(post("__proto__.x=1"))).toBe(400);
  expect(await statusOf(post(Array.from({ length: 521 }, () => "a=1").join("&")))).toBe(400);
});

test("conform's own fields, whose contents name fields too, don't reach it", async () => {
  const intent = encodeURIComponent(
    JSON.stringify({ type: "update", payload: { name: "a[99999999]", value: 1 } }),
  );
  const form = await readForm(post(`__intent__=${intent}&__state__=no+json&name=x`));
  expect([...form.keys()]).toEqual(["name"]);
});

test("a body that is no form, or a broken one, is refused with words", async () => {
  expect(await statusOf(post('{"email":"x"}', "application/json"))).toBe(415);
  expect(await statusOf(post("email=x", "text/plain"))).toBe(415);
  expect(await statusOf(post("nothing of the kind", "multipart/form-data; boundary=line"))).toBe(400);
  expect(await statusOf(post("nothing of the kind", "multipart/form-data"))).toBe(400);
  const bare = new Request("http://mainsgate.test/", { method: "POST", body: new Uint8Array([1]) });
  expect(await statusOf(bare)).toBe(415);
  const files = new FormData();
  files.set("reason", new File(["x"], "x.txt"));
  expect(await statusOf(new Request("http://mainsgate.test/", { method: "POST", body: files }))).toBe(400);
});

test("no route reads a form by itself", () => {
  const files = readdirSync(routesFolder, { recursive: true, encoding: "utf8" }).filter((file) =>
    /\.tsx?$/.test(file),
  );
  const reading = files.filter((file) =>
    readFileSync(join(routesFolder, file), "utf8").includes("readForm("),
  );
  expect(reading.length).toBeGreaterThan(15);
  const byThemselves = files.filter((file) =>
    /\bformData\s*\(\s*\)/.test(readFileSync(join(routesFolder, file), "utf8")),
  );
  expect(byThemselves).toEqual([]);
});
