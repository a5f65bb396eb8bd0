import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, test } from "vitest";
import { unitStates, validity } from "~/workflow/states";
import { StateBadge } from "./state-badge";
import { TitleBlock } from "./title-block";
import { VerdictBadge, verdictWord, type Verdict } from "./verdict-badge";

const verdicts: Verdict[] = ["pass", "fail", "undecided", "unknown", "not-applicable", "not-possible"];
const shapeOf = (html: string) => /<svg.*<\/svg>/.exec(html)?.[0];

describe("a verdict", () => {
  test("is told by a word and a shape of its own, not by colour alone", () => {
    const html = verdicts.map((verdict) => renderToStaticMarkup(<VerdictBadge verdict={verdict} />));
    html.forEach((one, index) => expect(one).toContain(verdictWord(verdicts[index] ?? "pass")));
    expect(new Set(html.map(shapeOf)).size).toBe(verdicts.length);
  });

  test("that is absent is unknown, never a pass", () => {
    for (const absent of [null, undefined]) {
      const html = renderToStaticMarkup(<VerdictBadge verdict={absent} />);
      expect(html).toContain("Unknown");
      expect(html).not.toContain("pass");
    }
  });
});

describe("a state", () => {
  test("is green only for a signature that was computed to be in force", () => {
    for (const state of unitStates) {
      expect(renderToStaticMarkup(<StateBadge state={state} />), state).not.toContain("bg-pass");
    }
    const badge = (today: string, departures = false) =>
      renderToStaticMarkup(
        <StateBadge
          state="signed"
          standing={{ validity: validity("signed", "2027-06-30", today).kind, departures }}
        />,
      );
    expect(badge("2027-01-01")).toContain("bg-pass");
    expect(badge("2027-06-15")).toContain("recheck due");
    expect(badge("2027-07-01")).toContain("Lapsed");
    expect(badge("2027-07-01")).not.toContain("bg-pass");
    for (const today of ["2027-01-01", "2027-06-15"]) {
      expect(badge(today, true)).toContain("with departures");
      expect(badge(today, true)).not.toContain("bg-pass");
    }
    expect(badge("2027-07-01", true)).toContain("Lapsed");
  });
});

test("a datum of the title block that is not known says so", () => {
  const html = renderToStaticMarkup(<TitleBlock items={[{ label: "Cord", value: null }]} />);
  expect(html).toContain("not known");
});
