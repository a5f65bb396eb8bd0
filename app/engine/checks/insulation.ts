import type { BenchCheck, CheckDefinition } from "../bench-check";
import { answer, because, beforeTouching, caution, keyOf, makeDead } from "../check-parts";
import { originName } from "../earthing";
import { figure } from "../figure";
import { mainsSources } from "../insulation";
import type { InsulationBarrier } from "../analysis";
import { altitudeCitation, altitudeFactor, clearanceCitation, creepageCitation } from "../insulation-data";
import type { MapView } from "../map-view";
import type { RuleSet, RuleValue } from "../rule-set";
import type { UnitFacts } from "../unit-facts";

/** Insulation resistance and distances between mains and earth, parts that can be touched, and extra-low voltage. */
export const insulation: CheckDefinition = {
  id: "insulation",
  family: "insulation",
  derive(view, ruleSet, facts, analysis) {
    const inlets = mainsSources(view);
    if (analysis.insulation.barriers.length === 0 && inlets.length === 0) return [];
    return [
      ...(facts.protectionClass === "I" && inlets.length > 0 ? [mainsToEarth(view, ruleSet, inlets)] : []),
      ...analysis.insulation.barriers.flatMap((barrier) =>
        barrierChecks(view, ruleSet, facts, inlets, barrier),
      ),
    ];
  },
};

const conditions = (view: MapView): string[] => [
  "Line and neutral joined for the test",
  "Every mains switch on; a contact that needs power to close is bridged or tested apart",
  ...(view.ofKind("y-capacitor").length > 0
    ? ["The capacitors charge first: wait until the reading stands"]
    : []),
];

function mainsToEarth(view: MapView, ruleSet: RuleSet, inlets: string[]): BenchCheck {
  const heating = view.ofKind("load").some((each) => each.heating === "yes" && each.supply === "mains");
  // Its value and citation say whether the rule set allows less for heating elements at all.
  const limit = heating ? ruleSet.values.insulationClassIHeating : ruleSet.values.insulationClassI;
  const mains = view.wired.filter(({ circuit }) => circuit !== "elv").map(({ id }) => id);
  return resistance(view, ruleSet, {
    key: keyOf("insulation-earth", ...inlets),
    title: "Insulation between mains and earth",
    why: because(
      "Insulation that has worn or is damp lets current pass from mains to earthed metal.",
      inlets,
      mains,
    ),
    from: "line and neutral, joined",
    to: originName(view),
    limit,
    elements: inlets,
    conductors: mains,
    computed: null,
    extra:
      heating && limit.value < ruleSet.values.insulationClassI.value
        ? ["Limit for class I with a mains heating element, switched on"]
        : [],
  });
}

function barrierChecks(
  view: MapView,
  ruleSet: RuleSet,
  facts: UnitFacts,
  inlets: string[],
  barrier: InsulationBarrier,
): BenchCheck[] {
  const part = view.ofKind("accessible-part").find(({ id }) => barrier.elements.includes(id));
  const bonded = part !== undefined && barrier.grade === "basic";
  const why = because(
    `${barrier.grade === "basic" ? "Basic" : "Double or reinforced"} insulation is needed between ${barrier.between}.`,
    [...inlets, ...barrier.elements],
  );
  const computed = answer(barrier.verdict, [because(barrier.text, barrier.elements)]);
  const checks: BenchCheck[] = [];
  // A bonded part has been measured with the earth pin already.
  if (!bonded && inlets.length > 0) {
    checks.push(
      resistance(view, ruleSet, {
        key: keyOf("insulation-barrier", ...barrier.elements),
        title: `Insulation between ${barrier.between}`,
        why,
        from: "line and neutral, joined",
        to: part === undefined ? "the output's poles, joined" : view.name(part.id),
        limit: part === undefined ? ruleSet.values.insulationMainsToElv : ruleSet.values.insulationClassII,
        elements: [...inlets, ...barrier.elements],
        conductors: [],
        computed,
        extra: [],
      }),
    );
  }
  checks.push(
    ...distance("clearance", "through air", barrier.clearanceMm, clearanceCitation),
    ...distance("creepage", "over surfaces", barrier.creepageMm, creepageCitation),
  );
  return checks;

  function distance(
    id: string,
    way: string,
    millimetres: number | null,
    citation: RuleValue["citation"],
  ): BenchCheck[] {
    if (millimetres === null) return [];
    const isPart = part !== undefined;
    const height =
      facts.altitudeM === null || facts.altitudeM === undefined
        ? `Height above sea level not stated: up to ${figure(ruleSet.values.altitude.value)} m assumed`
        : `For ${figure(facts.altitudeM)} m above sea level`;
    return [
      {
        key: keyOf(`insulation-${id}`, ...barrier.elements),
        family: "insulation",
        title: `Distance ${way} between ${barrier.between}`,
        why: [why],
        method: [
          isPart
            ? `Find the place where anything at mains comes nearest to ${view.name(part.id)}, wires included, and measure ${way}.`
            : `Find where mains parts and the output of ${barrier.elements.map((each) => view.name(each)).join(", ")} come nearest, on the outside of the module and at its terminals, and measure ${way}.`,
          "Move wires to where they could get to before you measure.",
        ],
        cautions: [...beforeTouching(view), caution.charge],
        // The engine's answer is told once: here when no resistance test of this barrier carries it.
        computed: id === "clearance" && (bonded || inlets.length === 0) ? computed : null,
        asks: {
          kind: "reading",
          quantity: `Smallest distance ${way}`,
          unit: "mm",
          limit: { kind: "at-least", value: Number(millimetres.toPrecision(4)), unit: "mm", citation },
          instrument: { kind: "caliper", range: "0 to 150 mm" },
          conditions: [
            `For ${figure(facts.supplyVolts)} V, ${barrier.grade} insulation`,
            `Pollution degree ${ruleSet.values.pollutionDegree.value} assumed, material group III, overvoltage category II`,
            height,
          ],
        },
        photo: "optional",
        citations: [
          citation,
          ruleSet.values.pollutionDegree.citation,
          altitudeFactor(facts.altitudeM ?? ruleSet.values.altitude.value) === 1
            ? ruleSet.values.altitude.citation
            : altitudeCitation,
        ],
        subjects: { elements: [...inlets, ...barrier.elements], conductors: [] },
      },
    ];
  }
}

interface ResistanceParts {
  key: string;
  title: string;
  why: BenchCheck["why"][number];
  from: string;
  to: string;
  limit: RuleValue;
  elements: string[];
  conductors: string[];
  computed: BenchCheck["computed"];
  extra: string[];
}

function resistance(view: MapView, ruleSet: RuleSet, parts: ResistanceParts): BenchCheck {
  const volts = ruleSet.values.insulationTestVolts;
  const reduced = ruleSet.values.insulationReducedTestVolts;
  return {
    key: parts.key,
    family: "insulation",
    title: parts.title,
    why: [parts.why],
    method: [
      makeDead(view),
      `Connect the tester between ${parts.from}, and ${parts.to}.`,
      `Test with ${figure(volts.value)} V direct; with ${figure(reduced.value)} V if surge suppressors are built in, and note it.`,
      "Read when the figure stands still, then let the tester discharge the unit.",
    ],
    cautions: [...beforeTouching(view), caution.testVoltage],
    computed: parts.computed,
    asks: {
      kind: "reading",
      quantity: "Insulation resistance",
      unit: "MΩ",
      limit: { kind: "at-least", value: parts.limit.value, unit: "MΩ", citation: parts.limit.citation },
      instrument: {
        kind: "insulation-tester",
        range: `${figure(volts.value)} V, up to at least ${figure(parts.limit.value * 10)} MΩ`,
      },
      conditions: [...conditions(view), ...parts.extra],
    },
    photo: "none",
    citations: [parts.limit.citation, volts.citation],
    subjects: { elements: parts.elements, conductors: parts.conductors },
  };
}
