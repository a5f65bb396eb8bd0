import type { PartFinding } from "../analysis";
import type { BenchCheck, CheckDefinition } from "../bench-check";
import {
  answer,
  because,
  beforeTouching,
  caution,
  examination,
  keyOf,
  practice,
  worstVerdict,
} from "../check-parts";
import type { MapView } from "../map-view";
import { touchableCitation, touchableVolts } from "../voltage-class";

/** Contacts that carry more than may be touched, and parts that don't suit what they carry. Sound parts need no step. */
export const partsAlone: CheckDefinition = {
  id: "parts-alone",
  family: "insulation",
  derive(view, _ruleSet, _facts, analysis) {
    const byPart = new Map<string, PartFinding[]>();
    for (const finding of analysis.parts) {
      const key = keyOf(finding.kind === "touch" ? "touch-voltage" : "part-rating", finding.element);
      byPart.set(key, [...(byPart.get(key) ?? []), finding]);
    }
    return [...byPart].map(([key, findings]) =>
      key.startsWith("touch") ? touchCheck(view, key, findings) : ratingCheck(view, key, findings),
    );
  },
};

const shared = (findings: PartFinding[]) => ({
  computed: answer(
    worstVerdict(findings.map(({ verdict }) => verdict)),
    findings.map(({ text, elements, conductors }) => because(text, elements, conductors)),
  ),
  subjects: {
    elements: [...new Set(findings.flatMap(({ elements }) => elements))],
    conductors: [...new Set(findings.flatMap(({ conductors }) => conductors))],
  },
});

function touchCheck(view: MapView, key: string, findings: PartFinding[]): BenchCheck {
  const id = findings[0]?.element ?? "";
  return {
    key,
    family: "insulation",
    title: `${view.name(id)} can't be touched, or carries little enough`,
    why: [because("Above these voltages a person must not be able to touch the contacts or the part.", [id])],
    method: [
      `With nothing plugged in, try with a test finger whether a live contact of ${view.name(id)} can be reached.`,
    ],
    cautions: [...beforeTouching(view), caution.licence],
    asks: examination(
      `Is everything above ${touchableVolts.alternating} V alternating or ${touchableVolts.direct} V direct out of reach of a test finger?`,
      "Out of reach",
      "It can be touched",
    ),
    photo: "required",
    citations: [touchableCitation],
    ...shared(findings),
  };
}

function ratingCheck(view: MapView, key: string, findings: PartFinding[]): BenchCheck {
  const id = findings[0]?.element ?? "";
  return {
    key,
    family: "fusing",
    title: `${view.name(id)} suits what it carries`,
    why: [because("A part beyond its rating fails, and often short or with heat.", [id])],
    method: [`Read the marks on ${view.name(id)} and hold them against the map.`],
    cautions: beforeTouching(view),
    asks: examination(
      "Is the fitted part the one on the map, and does it suit?",
      "As on the map, and it suits",
      "Another one, or it doesn't suit",
    ),
    photo: "optional",
    citations: [practice("ratings of parts")],
    ...shared(findings),
  };
}
