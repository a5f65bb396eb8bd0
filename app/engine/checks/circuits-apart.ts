import type { BenchCheck, CheckDefinition } from "../bench-check";
import {
  answer,
  because,
  beforeTouching,
  caution,
  examination,
  keyOf,
  makeDead,
  worstVerdict,
} from "../check-parts";
import { joinText } from "../joins";
import type { Citation } from "../rule-set";

const bridgingCapacitors: Citation = {
  standard: "IEC 60384-14",
  clause: "Y1 bridges double or reinforced insulation, Y2 basic insulation",
  edition: "not checked",
  mark: "M",
};

/** Nothing is joined that must be apart, in any position of the switches: mains and the rest, poles, parts that are touched. */
export const circuitsApart: CheckDefinition = {
  id: "circuits-apart",
  family: "insulation",
  derive(view, ruleSet, _facts, analysis) {
    const { joins, joinsComplete } = analysis.isolation;
    const sources = [
      ...view.ofKind("mains-inlet"),
      ...view.ofKind("dc-inlet"),
      ...view.ofKind("battery"),
    ].map(({ id }) => id);
    const parts = view.ofKind("accessible-part").map(({ id }) => id);
    const reasons = joins.map((join) =>
      because(joinText(view, join), [join.source, join.other, ...join.switchesOn], join.conductors),
    );
    const verdicts = joins.map(({ certainty }) =>
      certainty === "certain" ? ("fail" as const) : ("unknown" as const),
    );
    const gone = joinsComplete
      ? {
          verdict: "pass" as const,
          text: "In no position of the switches is a source short-circuited, mains joined with earth or another circuit, a part that is touched live, or a fuse or contact bridged.",
        }
      : {
          verdict: "unknown" as const,
          text: "There are more changeover switches than all positions can be worked out for; those worked out show nothing joined.",
        };
    const check: BenchCheck = {
      key: keyOf("circuits-apart"),
      family: "insulation",
      title: "Circuits that must be apart are apart",
      why: [
        because("One wrong joint puts mains on what people touch, or shorts a source.", [
          ...sources,
          ...parts,
        ]),
      ],
      method: [
        makeDead(view),
        "Test for continuity from each mains pin to each pole of each output and DC input, and to each touched part that is not earthed.",
        "Between line and neutral a winding or a heater conducts: that is no fault. The map answers for shorts between the poles of a source.",
        ...(view.ofKind("battery").length > 0
          ? [
              "Never put the ohmmeter across a battery. Test the leads that were taken off it: they don't conduct to a mains pin.",
            ]
          : []),
        "Repeat in every position of every switch.",
      ],
      cautions: [...beforeTouching(view), caution.charge],
      computed:
        joins.length > 0
          ? answer(worstVerdict(verdicts), reasons)
          : answer(gone.verdict, [because(gone.text, sources)]),
      asks: examination(
        "Is there no continuity where there must be none?",
        "None found",
        "Something is joined",
      ),
      photo: "none",
      citations: [
        ruleSet.values.insulationMainsToElv.citation,
        ...(view.ofKind("y-capacitor").length > 0 ? [bridgingCapacitors] : []),
      ],
      subjects: { elements: [...sources, ...parts], conductors: [] },
    };
    return sources.length === 0 ? [] : [check];
  },
};
