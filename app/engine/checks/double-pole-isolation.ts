import type { IsolationResult, Verdict3 } from "../analysis";
import type { BenchCheck, CheckDefinition } from "../bench-check";
import {
  answer,
  because,
  beforeTouching,
  caution,
  examination,
  keyOf,
  makeDead,
  practice,
  worstVerdict,
} from "../check-parts";
import { figure } from "../figure";
import { mixedBody, type MainsIsolation } from "../isolation-parts";
import { judgeMainsIsolation } from "../mains-isolation";
import type { MapView } from "../map-view";
import type { RuleSet } from "../rule-set";
import { list } from "../wording";

/** Off means off: all poles of mains broken together, far enough apart, by contacts rated for it. */
export const doublePoleIsolation: CheckDefinition = {
  id: "double-pole-isolation",
  family: "double-pole-isolation",
  derive(view, ruleSet, _facts, analysis) {
    const inlets = view.ofKind("mains-inlet").flatMap((inlet): BenchCheck[] => {
      const judged = judgeMainsIsolation(view, analysis.isolation, analysis.fusing, ruleSet, inlet);
      if (judged === null) return [];
      if (judged.by === "plug") return [plugCheck(view, inlet.id, judged)];
      return [
        switchCheck(view, ruleSet, inlet.id, judged),
        ...["L", "N"].map((pole) => poleCheck(view, ruleSet, inlet.id, pole)),
      ];
    });
    const bodies = view.ofKind("switch").map(({ id }): BenchCheck => {
      const contacts = analysis.fusing.contacts.filter((each) => each.switch === id);
      const mixed = mixedBody(view, analysis.isolation, id);
      const verdicts: Verdict3[] = [
        ...contacts.map(({ verdict }) => verdict),
        ...(mixed === null ? [] : [mixed.verdict]),
      ];
      const reasons = [
        ...contacts.map(({ text, source }) => because(text, [id, source])),
        ...(mixed === null ? [] : [because(mixed.text, [id])]),
      ];
      return {
        key: keyOf("switch-body", id),
        family: "double-pole-isolation",
        title: `${view.name(id)} is rated for what it breaks`,
        why: [
          because(
            "A contact that breaks more than it is rated for welds or burns; direct current is harder to break than alternating.",
            [id],
          ),
        ],
        method: [
          `Read the marks on ${view.name(id)}: voltage and current, alternating and direct. Compare them with the map.`,
          "Look at each pole's wires: which circuit does each belong to?",
        ],
        cautions: beforeTouching(view),
        computed: answer(worstVerdict(verdicts), reasons),
        asks: examination(
          "Do its marks and its wiring agree with the map?",
          "As on the map",
          "Other marks, no marks, or wired otherwise",
        ),
        photo: "required",
        citations: [
          practice(
            "switch marking",
            "IEC 61058-1 marking from memory; a rating for direct current is asked above 15 V and 1 A.",
          ),
        ],
        subjects: {
          elements: [id, ...contacts.map(({ source }) => source)],
          conductors: view.wired
            .filter(({ from, to }) => from.element === id || to.element === id)
            .map((each) => each.id),
        },
      };
    });
    return [...inlets, ...inverterChecks(view, analysis.isolation), ...bodies];
  },
};

function switchCheck(
  view: MapView,
  ruleSet: RuleSet,
  inlet: string,
  judged: Exclude<MainsIsolation, { by: "plug" }>,
): BenchCheck {
  const reasons = judged.reasons.map(({ reason }) => reason);
  const subjects = [...new Set([inlet, ...reasons.flatMap(({ elements }) => elements)])];
  return {
    key: keyOf("all-pole-switch", inlet),
    family: "double-pole-isolation",
    title: `All poles of ${view.name(inlet)} are broken together`,
    why: [
      because(
        "Whoever switches off believes that the unit is dead. A pole that stays joined may be the line.",
        [inlet],
      ),
    ],
    method: [
      "Trace line and neutral from the inlet to the switch: each goes to its own pole of the same body.",
      "With the plug pulled, work the switch: both poles open and close together.",
    ],
    cautions: [...beforeTouching(view), caution.charge],
    computed: answer(judged.verdict, reasons),
    asks: examination(
      "Does one switch break both poles together?",
      "Both poles, one body, together",
      "One pole only, or two switches",
    ),
    photo: "required",
    citations: [ruleSet.values.contactGap.citation],
    subjects: { elements: subjects, conductors: reasons.flatMap(({ conductors }) => conductors) },
  };
}

function poleCheck(view: MapView, ruleSet: RuleSet, inlet: string, pole: string): BenchCheck {
  const word = pole === "L" ? "line" : "neutral";
  const limit = ruleSet.values.insulationClassI;
  return {
    key: keyOf("open-pole", inlet, pole),
    family: "double-pole-isolation",
    title: `The ${word} of ${view.name(inlet)} is open with the switch off`,
    why: [because(`The ${word} must be parted from everything behind the switch.`, [inlet])],
    method: [
      makeDead(view),
      "Put every switch off.",
      `Measure from the ${word} pin of the plug to the ${word} terminal of what comes behind the switch, with ${figure(ruleSet.values.insulationTestVolts.value)} V.`,
    ],
    cautions: [...beforeTouching(view), caution.testVoltage],
    computed: null,
    asks: {
      kind: "reading",
      quantity: "Resistance across the open pole",
      unit: "MΩ",
      limit: { kind: "at-least", value: limit.value, unit: "MΩ", citation: limit.citation },
      instrument: {
        kind: "insulation-tester",
        range: `${figure(ruleSet.values.insulationTestVolts.value)} V, up to at least ${figure(limit.value * 10)} MΩ`,
      },
      conditions: ["Every switch off", "Unit unplugged"],
    },
    photo: "none",
    citations: [
      {
        ...limit.citation,
        note: "The insulation value of class I is used for an open pole: a rule of ours, not of the standard.",
      },
    ],
    subjects: {
      elements: [inlet],
      conductors: view.wired.filter(({ circuit }) => circuit === "mains").map(({ id }) => id),
    },
  };
}

/** Where an inverter makes mains voltage from a battery, off must end it. */
function inverterChecks(view: MapView, isolation: IsolationResult): BenchCheck[] {
  if (!view.ofKind("converter").some(({ output }) => output === "mains")) return [];
  return view.ofKind("battery").map(({ id }): BenchCheck => {
    const live = isolation.whenOff.flatMap(({ conductor, from }) =>
      view.conductors.get(conductor)?.circuit === "mains"
        ? from.filter(({ source }) => source === id).map(({ certainty }) => ({ conductor, certainty }))
        : [],
    );
    const conductors = live.map(({ conductor }) => conductor);
    const verdict: Verdict3 = live.some(({ certainty }) => certainty === "certain")
      ? "fail"
      : live.length > 0
        ? "unknown"
        : "pass";
    return {
      key: keyOf("inverter-off", id),
      family: "double-pole-isolation",
      title: `Off ends the mains voltage made from ${view.name(id)}`,
      why: [
        because("An outlet that an inverter feeds is as dangerous as mains, with the plug pulled too.", [id]),
      ],
      method: [
        "Pull the plug, put every switch off and measure between the poles of each outlet and from each pole to earth.",
      ],
      cautions: [caution.stillLive, caution.inverterLive, caution.battery],
      computed: answer(verdict, [
        verdict === "pass"
          ? because(`With every switch off ${view.name(id)} feeds no conductor at mains voltage.`, [id])
          : because(
              `With every switch off ${list(conductors)} stay at mains voltage, made from ${view.name(id)}.`,
              [id],
              conductors,
            ),
      ]),
      asks: examination(
        "Is every outlet dead with the switches off and the plug pulled?",
        "Dead",
        "Voltage found",
      ),
      photo: "none",
      citations: [practice("off ends what an inverter feeds")],
      subjects: { elements: [id, ...view.ofKind("converter").map((each) => each.id)], conductors },
    };
  });
}

function plugCheck(
  view: MapView,
  inlet: string,
  judged: Extract<MainsIsolation, { by: "plug" }>,
): BenchCheck {
  const reasons = judged.reasons.map(({ reason }) => reason);
  return {
    key: keyOf("plug-disconnect", inlet),
    family: "double-pole-isolation",
    title: `The plug of ${view.name(inlet)} isolates the unit`,
    why: reasons,
    method: [
      "Look where the unit will stand: can the plug be reached and pulled at once?",
      "No control on the unit may be marked as if it isolated mains.",
    ],
    cautions: [],
    computed: null,
    asks: examination(
      "Is the plug in easy reach, and does nothing else claim to isolate?",
      "In reach, no false claim",
      "Out of reach, or a control claims it",
    ),
    photo: "optional",
    citations: [{ standard: "IEC 62368-1", clause: "Annex L", edition: "not checked", mark: "M" }],
    subjects: { elements: [inlet, ...reasons.flatMap(({ elements }) => elements)], conductors: [] },
  };
}
