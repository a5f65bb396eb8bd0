import { expect, test } from "vitest";
import type { CheckFamily } from "~/engine/bench-check";
import type { LineVerdict } from "~/engine/bench-answer";
import { beforeMains } from "./before-mains";

const line = (title: string, family: CheckFamily, verdict: LineVerdict, energised = false) => ({
  check: { title, family, energised },
  verdict,
});
const finding = (number: number, severity: "danger" | "defect", closed: boolean) => ({
  number,
  severity,
  text: "The earth wire is loose.",
  closing: closed ? { text: "Seen tight.", by: "Ilse", at: new Date(0) } : null,
});
const live = { energised: true };

test("mains stays off until earth, insulation and isolation have passed, whatever else they are", () => {
  const lines = [
    line("Earth", "protective-earth", "fail"),
    line("Insulation", "insulation", "open"),
    line("Poles", "double-pole-isolation", "undecided"),
    line("Other poles", "double-pole-isolation", "not-possible"),
    line("Other insulation", "insulation", "not-applicable"),
    line("Other earth", "protective-earth", "pass"),
  ];
  expect(beforeMains(live, lines, [])).toEqual([
    "Earth: failed.",
    "Insulation: not done yet.",
    "Poles: undecided.",
    "Other poles: could not be done.",
    "Other insulation: left out as not applicable.",
  ]);
});

test("only an open finding of danger keeps mains off", () => {
  const findings = [finding(1, "danger", true), finding(2, "defect", false), finding(3, "danger", false)];
  expect(beforeMains(live, [], findings)).toEqual(["Finding 3, danger, is open: The earth wire is loose."]);
});

test("neither a dead step nor another family's or a live step's verdict is held back", () => {
  const open = [line("Earth", "protective-earth", "open")];
  expect(beforeMains({ energised: false }, open, [finding(1, "danger", false)])).toEqual([]);
  expect(beforeMains({}, open, [])).toEqual([]);
  expect(
    beforeMains(live, [line("Marks", "marking", "fail"), line("Live", "insulation", "open", true)], []),
  ).toEqual([]);
});
