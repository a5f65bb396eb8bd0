import { expect, test } from "vitest";
import { validity } from "~/workflow/states";
import { validityWords } from "./validity-words";

const on = (today: string, departures: boolean) =>
  validityWords(validity("signed", "2027-06-30", today), departures);

test.each(["2027-01-01", "2027-06-15"])(
  "a unit signed despite failing checks always says so (%s)",
  (today) => {
    expect(on(today, true)).toMatchObject({
      title: expect.stringContaining("with departures"),
      text: expect.stringContaining("Not every check passed"),
      tone: "undecided",
    });
    expect(on(today, false).title).not.toContain("departures");
  },
);

test("a recheck that is due is told with departures as without", () => {
  for (const departures of [true, false]) expect(on("2027-06-15", departures).title).toContain("recheck due");
});

test("a lapsed one must not be plugged in, whatever it was signed with", () => {
  for (const departures of [true, false]) {
    expect(on("2027-07-01", departures)).toMatchObject({
      title: expect.stringContaining("Must not"),
      tone: "fail",
    });
  }
});
