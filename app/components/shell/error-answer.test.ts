import { UNSAFE_ErrorResponseImpl as ErrorResponse } from "react-router";
import { expect, test } from "vitest";
import { errorAnswer } from "./error-answer";

const thrown = (status: number, told: unknown) => new ErrorResponse(status, "", told);

test("the reason for a refusal is told in the service's words", () => {
  expect(errorAnswer(thrown(403, "This needs the role electrician."))).toMatchObject({
    status: 403,
    message: "This needs the role electrician.",
  });
});

test("a conflict gives back what was typed", () => {
  const answer = errorAnswer(
    thrown(409, {
      message: "Ines took it.",
      typed: [{ label: "Reason", value: "Frayed" }, { label: 3 }],
      reloadHref: "/w/demo",
    }),
  );
  expect(answer).toEqual({
    status: 409,
    message: "Ines took it.",
    typed: [{ label: "Reason", value: "Frayed" }],
    reloadHref: "/w/demo",
  });
});

test("nothing of a defect reaches the page", () => {
  expect(errorAnswer(new Error("ECONNREFUSED 10.0.0.7")).message).toBeNull();
  expect(errorAnswer(thrown(500, "ECONNREFUSED 10.0.0.7")).message).toBeNull();
  expect(errorAnswer(thrown(404, 'Error: No route matches URL "/x"')).message).toBeNull();
  expect(errorAnswer(undefined)).toEqual({ status: 500, message: null, typed: [], reloadHref: null });
});

test("that a part is away is told", () => {
  expect(errorAnswer(thrown(503, "The database can't be reached just now.")).message).toContain("database");
});
