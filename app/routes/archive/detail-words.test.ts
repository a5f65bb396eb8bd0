import { expect, test } from "vitest";
import { detailWords } from "./detail-words";

test("keys and values of the trail are told in words", () => {
  expect(detailWords(["mapSha256", "ab12"])).toEqual({ name: "SHA-256 of the map", value: "ab12" });
  expect(detailWords(["told", 3])).toEqual({ name: "People told by mail", value: "3" });
  expect(detailWords(["verdicts", { pass: 7, fail: 0, "not-applicable": 2 }])).toEqual({
    name: "Checks by verdict",
    value: "pass 7, not applicable 2",
  });
  expect(detailWords(["supersedes", [4, 9]]).value).toBe("4, 9");
  expect(detailWords(["carried", []]).value).toBe("none");
});

test("what has no words of its own is still told, whole", () => {
  expect(detailWords(["somethingNew", { a: null, b: true }])).toEqual({
    name: "somethingNew",
    value: "a none, b yes",
  });
});
