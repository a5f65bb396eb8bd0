import { expect, test } from "vitest";
import fc from "fast-check";

import type { Limit } from "./bench-check";
import { combineVerdict, expandedUncertainty, judgeReading, type Accuracy } from "./verdict";

// Rule: guard band w = U with k = 2, as in the public guidance on decision rules for conformity. Worked by hand.
const citation = { standard: "worked example", clause: "", edition: "", mark: "C" } as const;
const atMost = (value: number, unit: string): Limit => ({ kind: "at-most", value, unit, citation });
const atLeast = (value: number, unit: string): Limit => ({ kind: "at-least", value, unit, citation });

const lowOhm: Accuracy = { percent: 2, digits: 3, resolution: 0.001 };
const leakageClamp: Accuracy = { percent: 3, digits: 5, resolution: 0.01 };

test.each([
  // limit, reading, accuracy, U, verdict
  [atMost(0.152, "Ω"), 0.14, lowOhm, 0.0067, "pass"],
  [atMost(0.152, "Ω"), 0.148, lowOhm, 0.00688, "undecided"],
  [atMost(0.152, "Ω"), 0.155, lowOhm, 0.00704, "undecided"],
  [atMost(0.152, "Ω"), 0.165, lowOhm, 0.00727, "fail"],
  [atMost(3.5, "mA"), 3.3, leakageClamp, 0.172, "pass"],
  [atMost(3.5, "mA"), 3.45, leakageClamp, 0.177, "undecided"],
  [atMost(3.5, "mA"), 3.7, leakageClamp, 0.186, "fail"],
] as const)("%j read as %d comes to U = %d and is %s", (limit, value, accuracy, uncertainty, verdict) => {
  const judged = judgeReading(limit, { value }, accuracy, "rect");
  expect(judged.verdict).toBe(verdict);
  expect(judged.expandedUncertainty).toBeCloseTo(uncertainty, 3);
  expect(judged.neededAccuracy === null).toBe(verdict !== "undecided");
});

test("with 30 % of reading the bounds of a minimum of 1 MΩ lie at 1.4286 and 0.7692 MΩ", () => {
  const tester: Accuracy = { percent: 30, digits: 0, resolution: 0.01 };
  const judge = (value: number) => judgeReading(atLeast(1, "MΩ"), { value }, tester, "maker-k2").verdict;
  expect([judge(1.4287), judge(1.4285), judge(0.7693), judge(0.7691)]).toEqual([
    "pass",
    "undecided",
    "undecided",
    "fail",
  ]);
});

test("1.6 MΩ on a class II unit fails 2.0 MΩ with a good tester and is open with a poor one", () => {
  expect(
    judgeReading(atLeast(2, "MΩ"), { value: 1.6 }, { percent: 3, digits: 2, resolution: 0.01 }, "rect")
      .verdict,
  ).toBe("fail");
  expect(
    judgeReading(atLeast(2, "MΩ"), { value: 1.6 }, { percent: 30, digits: 0, resolution: 0.01 }, "maker-k2")
      .verdict,
  ).toBe("undecided");
});

test("the maker's accuracy as k = 2 gives U = a, as a rectangle 2a/√3", () => {
  expect(expandedUncertainty(0.14, lowOhm, "maker-k2")).toBeCloseTo(0.0058, 12);
  expect(expandedUncertainty(0.14, lowOhm, "rect")).toBeCloseTo((2 * 0.0058) / Math.sqrt(3), 12);
});

test("a display that reads over its range passes a minimum only with 30 % in hand", () => {
  const over = (value: number, limit: Limit) =>
    judgeReading(limit, { value, bound: ">" }, null, "rect").verdict;
  expect(over(500, atLeast(1, "MΩ"))).toBe("pass");
  expect(over(1.42, atLeast(1, "MΩ"))).toBe("undecided");
  expect(over(1.43, atLeast(1, "MΩ"))).toBe("pass");
  expect(over(20, atMost(3.5, "mA"))).toBe("fail");
});

test("a display that reads under its range passes a maximum and fails a minimum", () => {
  const under = (value: number, limit: Limit) =>
    judgeReading(limit, { value, bound: "<" }, null, "rect").verdict;
  expect(under(0.01, atMost(0.3, "Ω"))).toBe("pass");
  expect(under(0.3, atMost(0.3, "Ω"))).toBe("undecided");
  expect(under(0.5, atLeast(1, "MΩ"))).toBe("fail");
});

test("a blank or an unknown accuracy decides nothing", () => {
  expect(judgeReading(atMost(1, "Ω"), { value: Number.NaN }, lowOhm, "rect").verdict).toBe("undecided");
  expect(judgeReading(atMost(1, "Ω"), { value: 0 }, null, "rect").verdict).toBe("undecided");
  expect(
    judgeReading(atMost(1, "Ω"), { value: 0 }, { percent: Number.NaN, digits: 0, resolution: 0 }, "rect")
      .verdict,
  ).toBe("undecided");
});

test("between two limits both sides count", () => {
  const limit: Limit = { kind: "between", lower: 11, upper: 14, unit: "V", citation };
  const exact: Accuracy = { percent: 0, digits: 1, resolution: 0.1 };
  const judge = (value: number) => judgeReading(limit, { value }, exact, "maker-k2").verdict;
  expect([judge(10.8), judge(11), judge(12), judge(13.95), judge(14.2)]).toEqual([
    "fail",
    "undecided",
    "pass",
    "undecided",
    "fail",
  ]);
});

test("a fail on either side fails, a pass needs all that is there", () => {
  expect(combineVerdict("fail", "pass")).toBe("fail");
  expect(combineVerdict("pass", "fail")).toBe("fail");
  expect(combineVerdict("pass", "pass")).toBe("pass");
  expect(combineVerdict(null, "pass")).toBe("pass");
  expect(combineVerdict("unknown", "pass")).toBe("undecided");
  expect(combineVerdict("pass", null)).toBe("undecided");
  expect(combineVerdict(null, null)).toBe("undecided");
});

test("a poorer instrument never turns an open verdict into a decided one", () => {
  const size = fc.double({ min: 0.001, max: 1000, noNaN: true });
  fc.assert(
    fc.property(
      size,
      size,
      fc.double({ min: 0, max: 30, noNaN: true }),
      fc.double({ min: 0, max: 30, noNaN: true }),
      (limit, value, a, b) => {
        const judge = (percent: number) =>
          judgeReading(atMost(limit, "Ω"), { value }, { percent, digits: 1, resolution: 0.001 }, "rect")
            .verdict;
        const [fine, coarse] = [judge(Math.min(a, b)), judge(Math.max(a, b))];
        expect(coarse === fine || coarse === "undecided").toBe(true);
      },
    ),
  );
});

test("a reading of nought decides nothing under a maximum or between two limits, and says how to write it", () => {
  const judged = judgeReading(atMost(0.3, "Ω"), { value: 0 }, lowOhm, "rect");
  expect(judged.verdict).toBe("undecided");
  expect(judged.neededAccuracy).toContain("below 0.001 Ω");
  const between: Limit = { kind: "between", lower: 12.8, upper: 14.6, unit: "V", citation };
  expect(
    judgeReading(between, { value: 0 }, { percent: 0.5, digits: 2, resolution: 0.01 }, "rect").verdict,
  ).toBe("undecided");
  // Written as under-range it is a statement about the instrument, and passes.
  expect(judgeReading(atMost(0.3, "Ω"), { value: 0.001, bound: "<" }, lowOhm, "rect").verdict).toBe("pass");
  expect(judgeReading(atMost(0.3, "Ω"), { value: 0, bound: "<" }, lowOhm, "rect").verdict).toBe("undecided");
});

test("nought counts where the last place is too coarse for less, and says so; at a minimum it fails", () => {
  const coarse: Accuracy = { percent: 2, digits: 1, resolution: 0.1 };
  const judged = judgeReading(atMost(3.5, "mA"), { value: 0 }, coarse, "rect");
  expect(judged.verdict).toBe("pass");
  expect(judged.reason).toContain("too coarse to show less");
  expect(judgeReading(atLeast(1, "MΩ"), { value: 0 }, { ...coarse, resolution: 0.01 }, "rect").verdict).toBe(
    "fail",
  );
});

test("no instrument is exact: an accuracy of nothing at all is not known", () => {
  for (const accuracy of [
    { percent: 0, digits: 0, resolution: 0 },
    { percent: 0, digits: 5, resolution: 0 },
    { percent: 0, digits: 0, resolution: 0.001 },
  ])
    expect(judgeReading(atMost(0.3, "Ω"), { value: 0.3 }, accuracy, "rect").verdict).toBe("undecided");
});

test("a negative size decides nothing; degrees Celsius go below nought", () => {
  expect(judgeReading(atMost(0.3, "Ω"), { value: -5 }, lowOhm, "rect").verdict).toBe("undecided");
  expect(
    judgeReading(atMost(48, "°C"), { value: -5 }, { percent: 1, digits: 1, resolution: 0.1 }, "rect").verdict,
  ).toBe("pass");
});
