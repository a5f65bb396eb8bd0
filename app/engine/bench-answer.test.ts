import { describe, expect, test } from "vitest";
import {
  accuracyAt,
  type BenchAnswer,
  isDecided,
  judgeBenchReading,
  lineVerdict,
  lineVerdicts,
  readingObjection,
} from "./bench-answer";
import type { Limit } from "./bench-check";
import type { Judgement } from "./verdict";

const citation = { standard: "Made for this test", clause: "1", edition: "1", mark: "C" as const };
const atMost = (value: number, unit: string): Limit => ({ kind: "at-most", value, unit, citation });
const atLeast = (value: number, unit: string): Limit => ({ kind: "at-least", value, unit, citation });

describe("the accuracy of a reading", () => {
  const ranges = [
    { unit: "Ω", lower: 0, upper: 20, percent: 2, digits: 3, resolution: 0.01 },
    { unit: "Ω", lower: 0, upper: 2, percent: 1, digits: 2, resolution: 0.001 },
  ];

  test("is that of the finest range that holds the value", () => {
    expect(accuracyAt(ranges, 0.2, "Ω")).toEqual({ percent: 1, digits: 2, resolution: 0.001 });
    expect(accuracyAt(ranges, 2.5, "Ω")).toEqual({ percent: 2, digits: 3, resolution: 0.01 });
  });

  test("comes in the unit of the reading", () => {
    expect(accuracyAt(ranges, 200, "mΩ")).toEqual({ percent: 1, digits: 2, resolution: 1 });
  });

  test("is not known outside every range, nor for another quantity", () => {
    expect(accuracyAt(ranges, 20.1, "Ω")).toBeNull();
    expect(accuracyAt([{ ...ranges[0]!, lower: 0.2 }], 0.1, "Ω")).toBeNull();
    expect(accuracyAt(ranges, 1, "V")).toBeNull();
    expect(accuracyAt([], 1, "Ω")).toBeNull();
  });
});

describe("a reading in another prefix than its limit", () => {
  const accuracy = { percent: 1, digits: 2, resolution: 1 };

  test("is judged with its resolution scaled too", () => {
    // a = 1 % of 296 mΩ + 2 × 1 mΩ = 4.96 mΩ, by the policy that takes it as U (k = 2): 296 + 4.96 > 300, undecided.
    const near = judgeBenchReading(
      atMost(0.3, "Ω"),
      { value: 296, unit: "mΩ", bound: null },
      accuracy,
      "maker-k2",
    );
    expect(near.verdict).toBe("undecided");
    expect(near.expandedUncertainty).toBeCloseTo(0.00496, 9);
    // 294 + 4.94 < 300: pass.
    const clear = judgeBenchReading(
      atMost(0.3, "Ω"),
      { value: 294, unit: "mΩ", bound: null },
      accuracy,
      "maker-k2",
    );
    expect(clear.verdict).toBe("pass");
  });

  test("over its range passes a minimum only with 30 % in hand", () => {
    const over = (value: number) =>
      judgeBenchReading(atLeast(1, "MΩ"), { value, unit: "kΩ", bound: "over" }, null, "rect").verdict;
    expect(over(1500)).toBe("pass");
    expect(over(1400)).toBe("undecided");
  });

  test("decides nothing in a unit that measures something else, or without a known accuracy", () => {
    const wrong = judgeBenchReading(
      atMost(0.3, "Ω"),
      { value: 0.1, unit: "V", bound: null },
      accuracy,
      "rect",
    );
    expect(wrong.verdict).toBe("undecided");
    const unstated = judgeBenchReading(
      atMost(0.3, "Ω"),
      { value: 0.1, unit: "Ω", bound: null },
      null,
      "rect",
    );
    expect(unstated.verdict).toBe("undecided");
  });
});

describe("a line of the sheet", () => {
  const judged = (verdict: Judgement["verdict"]): BenchAnswer => ({
    kind: "measured",
    judgement: { verdict, expandedUncertainty: 0.1, guardBand: "", reason: "", neededAccuracy: null },
  });
  const computed = [null, "pass", "fail", "unknown"] as const;
  const answers: (BenchAnswer | null)[] = [
    null,
    judged("pass"),
    judged("fail"),
    judged("undecided"),
    { kind: "examined", conforms: true },
    { kind: "examined", conforms: false },
    { kind: "not-applicable" },
    { kind: "not-possible" },
  ];

  test("passes only when the bench passed it and the map doesn't speak against it", () => {
    for (const map of computed) {
      for (const answer of answers) {
        const good =
          answer !== null &&
          ((answer.kind === "measured" && answer.judgement.verdict === "pass") ||
            (answer.kind === "examined" && answer.conforms)) &&
          (map === null || map === "pass");
        expect(lineVerdict(map, answer).verdict === "pass", `${map} with ${JSON.stringify(answer)}`).toBe(
          good,
        );
      }
    }
  });

  test("is open, whatever the map says, until the bench has answered", () => {
    for (const map of computed) expect(lineVerdict(map, null).verdict).toBe("open");
  });

  test("fails where the map fails, also when the step is called not applicable or not possible", () => {
    for (const answer of answers.filter((each) => each !== null)) {
      expect(lineVerdict("fail", answer).verdict).toBe("fail");
    }
  });

  test("stays undecided where the map leaves something unknown, and says so", () => {
    const line = lineVerdict("unknown", { kind: "examined", conforms: true });
    expect(line.verdict).toBe("undecided");
    expect(line.because).toContain("unknown");
  });

  test("stays undecided where the map leaves something unknown and the step is called not applicable", () => {
    const line = lineVerdict("unknown", { kind: "not-applicable" });
    expect(line.verdict).toBe("undecided");
    expect(line.because).toContain("does apply");
    expect(lineVerdict("unknown", { kind: "not-possible" }).verdict).toBe("not-possible");
    expect(lineVerdict("pass", { kind: "not-applicable" }).verdict).toBe("not-applicable");
    expect(lineVerdict(null, { kind: "not-applicable" }).verdict).toBe("not-applicable");
  });

  test("is decided unless it is open or undecided", () => {
    expect(lineVerdicts.filter((verdict) => !isDecided(verdict))).toEqual(["undecided", "open"]);
  });
});

test("a size has no sign, except in degrees Celsius, and must be a number", () => {
  expect(readingObjection(-230, "V")).toContain("without its sign");
  expect(readingObjection(-12, "°C")).toBeNull();
  expect(readingObjection(Number.NaN, "V")).not.toBeNull();
  expect(readingObjection(0, "V")).toBeNull();
});
