import { expect, test } from "vitest";
import { refusalsIn } from "./refusal";

test.each([
  ["nothing was answered: it was done", undefined, []],
  ["an answer without a refusal", { conflict: null, status: "success" }, []],
  ["a message", { message: "It lapsed." }, ["It lapsed."]],
  ["a conflict", { status: "error", conflict: "Ines took it.", error: {} }, ["Ines took it."]],
  [
    "errors by field, and the form's own",
    { status: "error", error: { "": ["No."], reason: ["Say why."] } },
    ["No.", "Say why."],
  ],
  ["a message that is also a form error, once", { message: "No.", error: { "": ["No."] } }, ["No."]],
  [
    "conform's null for a field without errors",
    { status: "error", error: { reason: null } },
    ["This was not accepted."],
  ],
  ["a refusal without words still is one", { status: "error" }, ["This was not accepted."]],
])("%s", (_, answer, sentences) => {
  expect(refusalsIn(answer)).toEqual(sentences);
});
