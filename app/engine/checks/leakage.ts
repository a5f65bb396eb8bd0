import type { BenchCheck, CheckDefinition, ComputedAnswer } from "../bench-check";
import { answer, because, caution, keyOf, whileWorking, worksOnMains } from "../check-parts";
import { circuitOf } from "../circuit";
import { figure } from "../figure";
import { mainsSources } from "../insulation";
import { earthCurrentLimit, judgeLeakage, leakageSum, type LeakageLimit, type LeakageSum } from "../leakage";
import type { UnitFacts } from "../unit-facts";

/** Current in the earth conductor of class I, and what a person who touches the unit would feel. */
export const leakage: CheckDefinition = {
  id: "leakage",
  family: "leakage",
  derive(view, ruleSet, facts) {
    const inlets = mainsSources(view);
    if (inlets.length === 0) return [];
    const hasInlet = view.ofKind("mains-inlet").length > 0;
    const circuit = circuitOf(view);
    const sum = leakageSum(circuit, facts);
    const leaking = sum.parts.flatMap(({ elements }) => elements);
    const { touchCurrent } = ruleSet.values;
    const earthLimit = earthCurrentLimit(circuit, ruleSet, facts);
    const touched = [
      ...view.ofKind("accessible-part"),
      ...view.ofKind("outlet").filter(({ supply }) => supply === "dc"),
    ].map(({ id }) => id);
    const checks: BenchCheck[] = [];
    // Without a mains inlet no protective conductor leaves the unit.
    if (facts.protectionClass === "I" && hasInlet) {
      checks.push({
        key: keyOf("earth-current", ...inlets),
        family: "leakage",
        title: "Current in the protective conductor",
        why: [
          because(
            "Capacitors and worn insulation send current to earth; if the earth breaks, a person carries it.",
            [...inlets, ...leaking],
          ),
        ],
        method: [
          "Feed the unit through an adapter that brings out the earth conductor whole, and clamp that, or clamp all live conductors together. Never interrupt the earth.",
          "Every switch on, unit working. Measure, turn the plug round if it fits both ways, and take the higher.",
        ],
        cautions: [...whileWorking(view), caution.licence],
        energised: worksOnMains(view),
        computed: computedSum(sum, earthLimit, facts),
        asks: {
          kind: "reading",
          quantity: "Protective conductor current",
          unit: "mA",
          limit: { kind: "at-most", value: earthLimit.milliamps, unit: "mA", citation: earthLimit.citation },
          instrument: {
            kind: "leakage-meter",
            range: `0 to ${figure(Math.max(10, earthLimit.milliamps * 2))} mA alternating`,
          },
          conditions: ["All switches on", "The higher of both plug positions", ...earthLimit.notes],
        },
        photo: "none",
        citations: [earthLimit.citation],
        subjects: { elements: [...inlets, ...leaking], conductors: [] },
      });
    }
    // Without an earth to take it, all that leaks reaches whoever touches the unit.
    const unearthed = facts.protectionClass === "II" || !hasInlet;
    if (
      unearthed ||
      view.ofKind("accessible-part").some(({ reinforcedFromMains }) => reinforcedFromMains === "yes")
    ) {
      checks.push({
        key: keyOf("touch-current", ...inlets),
        family: "leakage",
        title: "Touch current",
        why: [
          because("Parts without an earth take some voltage through the supply's own capacitors.", [
            ...inlets,
            ...touched,
          ]),
        ],
        method: [
          touched.length > 0
            ? `Measure from earth to each of ${touched.map((id) => view.name(id)).join(", ")} through the body network, unit working.`
            : "Wrap foil where a hand would be and measure from earth to it through the body network, unit working.",
          "Turn the plug round if it fits both ways, and take the higher.",
        ],
        cautions: [...whileWorking(view), caution.licence],
        energised: worksOnMains(view),
        computed: unearthed
          ? computedSum(
              sum,
              { milliamps: touchCurrent.value, citation: touchCurrent.citation, notes: [] },
              facts,
            )
          : null,
        asks: {
          kind: "reading",
          quantity: "Touch current",
          unit: "mA",
          limit: { kind: "at-most", value: touchCurrent.value, unit: "mA", citation: touchCurrent.citation },
          instrument: { kind: "leakage-meter", range: "0 to 2 mA through a body network" },
          conditions: ["All switches on", "The higher of both plug positions"],
        },
        photo: "none",
        citations: [
          touchCurrent.citation,
          { standard: "IEC 60990", clause: "Figure 4 network", edition: "not checked", mark: "V" },
        ],
        subjects: { elements: [...new Set([...inlets, ...touched, ...leaking])], conductors: [] },
      });
    }
    return checks;
  },
};

/** The sum of what is known against a limit; `null` when nothing on the map leaks, so that only the bench can tell. */
function computedSum(sum: LeakageSum, limit: LeakageLimit, facts: UnitFacts): ComputedAnswer | null {
  if (sum.parts.length === 0) return null;
  const total = because(
    `In sum ${sum.complete ? "" : "at least "}${figure(sum.milliamps)} mA at ${figure(facts.supplyVolts)} V and ${figure(facts.supplyHertz)} Hz; the limit is ${figure(limit.milliamps)} mA.`,
  );
  return answer(judgeLeakage(sum, limit), [total, ...sum.parts]);
}
