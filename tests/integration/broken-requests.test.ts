import { beforeAll, describe, expect, test } from "vitest";
import { database } from "~/services/database.server";
import { type RealHandler, realHandler } from "../helpers/request-handler";
import { makeReviewable } from "../fixtures/signing";
import { makeUnit, makeWorkshop } from "../fixtures/workshop";

const db = database();
let server: RealHandler;
beforeAll(async () => {
  server = await realHandler();
});

const FORM = "application/x-www-form-urlencoded";

async function post(path: string, body: string, contentType = FORM, cookie = "") {
  return server.handle(
    new Request(`http://mainsgate.test${path}`, {
      method: "POST",
      body,
      headers: { "Content-Type": contentType, Cookie: cookie },
    }),
  );
}

const broken: [string, string, string, number][] = [
  ["JSON", '{"email":"x"}', "application/json", 415],
  ["bare text", "email=x", "text/plain", 415],
  ["a broken multipart form", "nothing of the kind", "multipart/form-data; boundary=line", 400],
  ["an index beyond every list", "a[99999999]=1&email=x&password=y", FORM, 400],
  ["endless nesting", `${"a.".repeat(20_000)}a=1`, FORM, 400],
];

describe.each(broken)("%s", (_what, body, contentType, status) => {
  test.each(["/sign-in", "/forgotten-password", "/theme"])("is refused by %s", async (path) => {
    expect((await post(path, body, contentType)).status).toBe(status);
  });

  test("is refused by the pages and the API of a unit", async () => {
    const made = await makeWorkshop(db);
    const { workshop, people } = made;
    const unit = await makeUnit(db, made);
    const cookie = await server.cookieOf(people.builder.id);
    for (const page of [`units/${unit.number}`, `units/${unit.number}/facts`, "units/new"]) {
      const answer = await post(`/w/${workshop.slug}/${page}`, body, contentType, cookie);
      expect([page, answer.status]).toEqual([page, status]);
    }
    const api = await post(`/api/w/${workshop.slug}/units/${unit.number}/files`, body, contentType, cookie);
    expect(api.status).toBe(status);
    expect(api.headers.get("Content-Type")).toBe("application/problem+json");
  });
});

describe("the form of a decision", () => {
  test("never takes an unknown act for a signature, nor a broken drawing for a defect of ours", async () => {
    const bench = await makeReviewable(db);
    const { workshop, people } = bench;
    const cookie = await server.cookieOf(people.electrician.id);
    const address = `/w/${workshop.slug}/signing/${bench.unit.number}`;
    for (const act of ["", "act=&", "act=Sign&", "act=approve&"]) {
      expect((await post(address, `${act}version=1`, FORM, cookie)).status).toBe(400);
    }
    const drawing = new URLSearchParams({
      act: "refuse",
      version: "1",
      statement: "The cord is bare at the gland.",
      signatureMethod: "drawn",
      signatureImage: "data:image/png;base64,!!!",
      password: "not asked for yet",
    });
    expect((await post(address, String(drawing), FORM, cookie)).status).toBe(400);
  });
});
