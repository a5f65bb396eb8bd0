import { expect, test } from "vitest";
import { unitStates, validity } from "./states";

test("a signed unit may be used until the end of its recheck date, and is announced 30 days before", () => {
  expect(validity("signed", "2027-06-30", "2027-05-30").kind).toBe("may-be-used");
  expect(validity("signed", "2027-06-30", "2027-05-31").kind).toBe("recheck-due");
  expect(validity("signed", "2027-06-30", "2027-06-30").kind).toBe("recheck-due");
  expect(validity("signed", "2027-06-30", "2027-07-01").kind).toBe("lapsed");
});

test("in every other state, or without a date, it must not be used", () => {
  for (const state of unitStates.filter((candidate) => candidate !== "signed")) {
    expect(validity(state, "2099-01-01", "2027-01-01")).toEqual({ kind: "must-not-be-used", because: state });
  }
  expect(validity("signed", null, "2027-01-01").kind).toBe("must-not-be-used");
});
