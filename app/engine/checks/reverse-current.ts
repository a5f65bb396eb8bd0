import { judgeLamp, judgePair } from "../backfeed";
import type { Ask, BenchCheck, CheckDefinition } from "../bench-check";
import { answer, because, caution, examination, keyOf, practice } from "../check-parts";
import { figure } from "../figure";
import type { MapView } from "../map-view";
import type { Citation, RuleSet } from "../rule-set";

/** Largest voltage on a dead DC input loaded with 1 kΩ, V: 1 mA of leakage. Our own rule: a healthy diode leaks microamperes. */
const loadedInputVolts = 1;
const ownRule: Citation = {
  standard: "Mainsgate rule",
  clause: "dead input loaded with 1 kΩ",
  edition: "1",
  mark: "C",
  note: "1 mA through 1 kΩ. An open meter of 10 MΩ would show nearly the battery's voltage through a healthy diode's leakage.",
};

/** Largest current from a pin that can be touched, stored energy working, one fault at a time, mA. */
const touchedPinMilliamps: { value: number; citation: Citation } = {
  value: 3.5,
  citation: {
    standard: "IEC 62040-1",
    clause: "backfeed protection, through the network of IEC 60990",
    edition: "not checked",
    mark: "M",
  },
};

/** For every pair of sources: one alone must not drive the other, nor its pins; and no lamp may tell an untruth by it. */
export const reverseCurrent: CheckDefinition = {
  id: "reverse-current",
  family: "reverse-current",
  derive(view, ruleSet, _facts, analysis) {
    const sources = [...view.ofKind("mains-inlet"), ...view.ofKind("dc-inlet"), ...view.ofKind("battery")];
    const pairs = sources.flatMap((from) =>
      sources
        .filter((to) => to.id !== from.id)
        .map((to): BenchCheck => {
          const judged = judgePair(view, analysis.reverse, from.id, to.id);
          const elements = [...new Set([from.id, to.id, ...judged.reasons.flatMap((each) => each.elements)])];
          return {
            key: keyOf("backfeed", from.id, to.id),
            family: "reverse-current",
            title: `${view.name(from.id)} does not drive ${view.name(to.id)} backwards`,
            why: [
              because(
                `${view.name(from.id)} and ${view.name(to.id)} are both sources: one must not push energy into the other.`,
                [from.id, to.id],
              ),
            ],
            method: methodFor(view, from.id, to.id),
            cautions: [
              ...(to.kind === "mains-inlet" ? [caution.shrouded, caution.licence] : []),
              ...(from.kind === "mains-inlet" ? [caution.live] : [caution.stillLive]),
              caution.battery,
            ],
            energised: from.kind === "mains-inlet",
            computed: answer(judged.verdict, judged.reasons),
            asks: askFor(view, ruleSet, to.id),
            photo: "none",
            citations:
              to.kind === "mains-inlet"
                ? [ruleSet.values.backfeedAcVolts.citation, touchedPinMilliamps.citation]
                : [ownRule],
            subjects: {
              elements,
              conductors: [...new Set(judged.reasons.flatMap((each) => each.conductors))],
            },
          };
        }),
    );
    const lamps = view.ofKind("indicator").flatMap(({ id }): BenchCheck[] => {
      const judged = judgeLamp(view, analysis.reverse, id);
      if (judged === null) return [];
      return [
        {
          key: keyOf("lamp-truth", id),
          family: "reverse-current",
          title: `${view.name(id)} is dark when what it tells is absent`,
          why: [
            because("A lamp that another source lights makes people believe in a state that is not there.", [
              id,
            ]),
          ],
          method: [
            "Take away what the lamp tells of: pull the plug or disconnect that source. Leave every other source in place.",
            "Try each position of each switch and watch the lamp, in dim light.",
          ],
          cautions: [caution.stillLive, caution.battery],
          computed: answer(judged.verdict, judged.reasons),
          asks: examination("Is the lamp dark in every position?", "Dark", "Lit or glowing"),
          photo: "optional",
          citations: [practice("true indication")],
          subjects: {
            elements: [...new Set([id, ...judged.reasons.flatMap(({ elements }) => elements)])],
            conductors: view.wired
              .filter(({ from, to }) => from.element === id || to.element === id)
              .map((each) => each.id),
          },
        },
      ];
    });
    return [...pairs, ...lamps];
  },
};

function methodFor(view: MapView, from: string, to: string): string[] {
  const target = view.elements.get(to)?.kind;
  if (target === "mains-inlet") {
    return [
      `Leave ${view.name(from)} in place and working; pull the plug of ${view.name(to)} and put it into a shrouded test socket that is joined to nothing.`,
      "One second later measure there between the pins, and from each pin to the earth pin, in every position of every switch.",
      `Where a relay keeps them apart: with everything dead, a person who may work on live mains bridges its contact; then the pins can carry mains voltage. Measure in the test socket again. Above the limit, what a person would get decides: at most ${figure(touchedPinMilliamps.value)} mA from pin to earth through the body network.`,
      "Take the bridge out and have that looked at by a second person.",
    ];
  }
  if (target === "dc-inlet") {
    return [
      `Leave ${view.name(from)} in place and working; unplug what feeds ${view.name(to)}.`,
      `Put 1 kΩ across the contacts of ${view.name(to)} and measure across it, in every position of every switch.`,
    ];
  }
  return [
    `Follow every way from ${view.name(from)} to the plus pole of ${view.name(to)}: each one passes the charger.`,
    "Try whether the blocking parts block: diode test forwards and backwards, one end lifted.",
  ];
}

function askFor(view: MapView, ruleSet: RuleSet, to: string): Ask {
  const target = view.elements.get(to)?.kind;
  if (target === "mains-inlet") {
    const limit = ruleSet.values.backfeedAcVolts;
    return {
      kind: "reading",
      quantity: "Voltage at the plug pins",
      unit: "V",
      limit: { kind: "at-most", value: limit.value, unit: "V", citation: limit.citation },
      instrument: {
        kind: "multimeter",
        range: `alternating and direct, up to ${figure(400)} V, category III`,
      },
      conditions: [
        `${figure(ruleSet.values.backfeedSeconds.value)} s after unplugging`,
        "The highest of all pins and switch positions, alternating or direct",
      ],
    };
  }
  if (target === "dc-inlet") {
    return {
      kind: "reading",
      quantity: "Voltage across 1 kΩ at the contacts",
      unit: "V",
      limit: { kind: "at-most", value: loadedInputVolts, unit: "V", citation: ownRule },
      instrument: { kind: "multimeter", range: "direct, 0 to 60 V" },
      conditions: ["1 kΩ across the contacts", "The highest of all switch positions"],
    };
  }
  return examination(
    "Does every way into the battery pass its charger, and do the blocking parts block?",
    "Only through the charger, all block",
    "Another way, or one that doesn't block",
  );
}
