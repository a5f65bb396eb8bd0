import type { Verdict3 } from "../analysis";
import type { BenchCheck, CheckDefinition } from "../bench-check";
import { answer, because, caution, keyOf } from "../check-parts";
import { circuitOf } from "../circuit";
import { figure } from "../figure";
import { leakageSum } from "../leakage";

/** Current in the earth conductor of class I, and what a person who touches the unit would feel. */
export const leakage: CheckDefinition = {
  id: "leakage",
  family: "leakage",
  derive(view, ruleSet, facts) {
    const inlets = view.ofKind("mains-inlet").map(({ id }) => id);
    if (inlets.length === 0) return [];
    const sum = leakageSum(circuitOf(view), facts);
    const handheld = facts.handheld ?? null;
    const { protectiveConductorCurrent, protectiveConductorCurrentHandheld, touchCurrent } = ruleSet.values;
    const earthLimit =
      handheld === false || protectiveConductorCurrentHandheld.value >= protectiveConductorCurrent.value
        ? protectiveConductorCurrent
        : protectiveConductorCurrentHandheld;
    const note =
      handheld === null && earthLimit !== protectiveConductorCurrent
        ? ["Whether it is held in the hand is not stated: the tighter limit is used"]
        : [];
    const touched = [
      ...view.ofKind("accessible-part"),
      ...view.ofKind("outlet").filter(({ supply }) => supply === "dc"),
    ].map(({ id }) => id);
    const checks: BenchCheck[] = [];
    if (facts.protectionClass === "I") {
      const verdict: Verdict3 = sum.milliamps > earthLimit.value ? "fail" : sum.complete ? "pass" : "unknown";
      const total = because(
        `In sum ${sum.complete ? "" : "at least "}${figure(sum.milliamps)} mA at ${figure(facts.supplyVolts)} V and ${figure(facts.supplyHertz)} Hz; the limit is ${figure(earthLimit.value)} mA.`,
      );
      checks.push({
        key: keyOf("earth-current", ...inlets),
        family: "leakage",
        title: "Current in the protective conductor",
        why: [
          because(
            "Capacitors and worn insulation send current to earth; if the earth breaks, a person carries it.",
            [...inlets, ...sum.parts.flatMap(({ elements }) => elements)],
          ),
        ],
        method: [
          "Feed the unit through an adapter that brings out the earth conductor whole, and clamp that, or clamp all live conductors together. Never interrupt the earth.",
          "Every switch on, unit working. Measure, turn the plug round if it fits both ways, and take the higher.",
        ],
        cautions: [caution.live, caution.licence],
        computed: sum.parts.length === 0 ? null : answer(verdict, [total, ...sum.parts]),
        asks: {
          kind: "reading",
          quantity: "Protective conductor current",
          unit: "mA",
          limit: { kind: "at-most", value: earthLimit.value, unit: "mA", citation: earthLimit.citation },
          instrument: {
            kind: "leakage-meter",
            range: `0 to ${figure(Math.max(10, earthLimit.value * 2))} mA alternating`,
          },
          conditions: ["All switches on", "The higher of both plug positions", ...note],
        },
        photo: "none",
        citations: [earthLimit.citation],
        subjects: { elements: [...inlets, ...sum.parts.flatMap(({ elements }) => elements)], conductors: [] },
      });
    }
    if (
      facts.protectionClass === "II" ||
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
        cautions: [caution.live, caution.licence],
        computed: null,
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
        subjects: { elements: [...inlets, ...touched], conductors: [] },
      });
    }
    return checks;
  },
};
