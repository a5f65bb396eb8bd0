import type { CheckDefinition } from "../bench-check";
import { because, keyOf, whileWorking, worksOnMains } from "../check-parts";
import type { Citation } from "../rule-set";
import { sentence } from "../wording";

const touchLimit = (value: number, mark: Citation["mark"], contact: string) => ({
  value,
  citation: {
    standard: "IEC 62368-1",
    clause: `Table 38, ${contact}`,
    edition: "not checked",
    mark,
    note: "Judged at 25 °C of air.",
  } satisfies Citation,
});

/** Surfaces that people touch, after the unit has run warm. */
export const heat: CheckDefinition = {
  id: "heat",
  family: "heat",
  derive(view, _ruleSet, facts) {
    const working = [
      ...view.ofKind("load"),
      ...view.ofKind("outlet"),
      ...view.ofKind("converter"),
      ...view.ofKind("transformer"),
      ...view.ofKind("isolated-supply"),
      ...view.ofKind("charger"),
    ];
    if (working.length === 0) return [];
    const metal = view.ofKind("accessible-part").map(({ id }) => id);
    const material = metal.length > 0 ? "metal" : "plastic";
    const handheld = facts.handheld ?? null;
    const limit =
      handheld === false
        ? touchLimit(material === "metal" ? 60 : 77, material === "metal" ? "M" : "V", "touched 1 to 10 s")
        : touchLimit(48, "M", "held for more than 1 min");
    const touched = handheld === false ? "touched 1 to 10 s" : "held for more than 1 min";
    const ids = [...metal, ...working.map(({ id }) => id)];
    return [
      {
        key: keyOf("heat-surface"),
        family: "heat",
        title: "Surfaces that are touched",
        why: [
          because(
            "What burns a hand or softens a case shows only after the unit has run warm, with its covers on.",
            ids,
          ),
        ],
        method: [
          "Run the unit at its largest load with all covers on until the hottest place rises by less than 1 K in half an hour.",
          handheld === false
            ? `Measure the hottest ${material} surface that a hand touches for a few seconds.`
            : "Measure the hottest place that the hand holds in use, and write down apart what is only touched.",
          "Add nothing for a warmer room; note the air's temperature.",
        ],
        cautions: [
          ...whileWorking(view),
          "Stay with the unit. Smoke, smell or a softening case ends the test: switch off, and take every source away from outside.",
        ],
        energised: worksOnMains(view),
        computed: null,
        asks: {
          kind: "reading",
          quantity: "Temperature of the hottest touched surface",
          unit: "°C",
          limit: { kind: "at-most", value: limit.value, unit: "°C", citation: limit.citation },
          instrument: { kind: "thermometer", range: "0 to 150 °C, contact probe" },
          conditions: [
            `${sentence(material)}, ${touched}`,
            ...(handheld === null
              ? ["Whether it is held in the hand is not stated: the tighter limit is used"]
              : []),
            "Air at 25 °C",
            "Largest load, covers on, settled",
          ],
        },
        photo: "optional",
        citations: [limit.citation],
        subjects: { elements: ids, conductors: [] },
      },
    ];
  },
};
