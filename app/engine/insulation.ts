import type { InsulationBarrier, InsulationResult, Verdict3 } from "./analysis";
import type { Circuit } from "./circuit";
import { bondingOf } from "./earthing";
import type { InsulationGrade } from "./energy-map";
import { figure } from "./figure";
import { requiredDistances, type PollutionDegree } from "./insulation-data";
import type { MapView } from "./map-view";
import type { RuleSet } from "./rule-set";
import { highestMainsVolts } from "./supply-data";
import type { UnitFacts } from "./unit-facts";

/** What must be insulated from mains and how well: outputs of supplies, parts that can be touched, poles in one switch. */
export function analyseInsulation(circuit: Circuit, ruleSet: RuleSet, facts: UnitFacts): InsulationResult {
  const { view } = circuit;
  if (!hasMains(circuit)) return { barriers: [] };
  const barriers: InsulationBarrier[] = [];
  const add = (
    id: string,
    between: string,
    elements: string[],
    grade: "basic" | "reinforced",
    megohms: number,
    judged: { verdict: Verdict3; text: string },
  ) => {
    const degree: PollutionDegree = ruleSet.values.pollutionDegree.value >= 3 ? 3 : 2;
    const altitudeM = facts.altitudeM ?? ruleSet.values.altitude.value;
    const distances = requiredDistances(highestMainsVolts(view, facts), grade, { degree, altitudeM });
    barriers.push({
      id,
      between,
      elements,
      grade,
      clearanceMm: distances?.clearanceMm ?? null,
      creepageMm: distances?.creepageMm ?? null,
      minimumMegohms: megohms,
      testVolts: ruleSet.values.insulationTestVolts.value,
      ...judged,
    });
  };

  for (const element of view.elements.values()) {
    const isStage =
      element.kind === "isolated-supply" ||
      element.kind === "transformer" ||
      (element.kind === "charger" && element.supply === "mains") ||
      (element.kind === "converter" && element.output === "mains");
    if (!isStage) continue;
    add(
      `stage ${element.id}`,
      `mains and the extra-low voltage of ${view.name(element.id)}`,
      [element.id],
      "reinforced",
      ruleSet.values.insulationMainsToElv.value,
      judgeGrade(view.name(element.id), element.insulation),
    );
  }
  const bonding = bondingOf(circuit);
  for (const part of view.ofKind("accessible-part")) {
    const earthed = facts.protectionClass === "I" ? (bonding.get(part.id)?.verdict ?? "fail") : "fail";
    const bonded = earthed === "pass";
    const grade = bonded ? "basic" : "reinforced";
    const degree: PollutionDegree = ruleSet.values.pollutionDegree.value >= 3 ? 3 : 2;
    const needed = requiredDistances(highestMainsVolts(view, facts), grade, {
      degree,
      altitudeM: facts.altitudeM ?? ruleSet.values.altitude.value,
    });
    add(
      `part ${part.id}`,
      `mains and ${view.name(part.id)}`,
      [part.id],
      grade,
      bonded ? ruleSet.values.insulationClassI.value : ruleSet.values.insulationClassII.value,
      judgePart(view.name(part.id), earthed, part, needed),
    );
  }
  return { barriers };
}

export const hasMains = ({ view }: Circuit): boolean =>
  view.ofKind("mains-inlet").length > 0 || view.ofKind("converter").some(({ output }) => output === "mains");

/** Where mains voltage comes from: the inlets, in a unit without one the inverters. */
export function mainsSources(view: MapView): string[] {
  const inlets = view.ofKind("mains-inlet").map(({ id }) => id);
  const inverters = view.ofKind("converter").filter(({ output }) => output === "mains");
  return inlets.length > 0 ? inlets : inverters.map(({ id }) => id);
}

function judgeGrade(name: string, grade: InsulationGrade): { verdict: Verdict3; text: string } {
  switch (grade) {
    case "reinforced":
      return { verdict: "pass", text: `${name}: its maker states double or reinforced insulation.` };
    case "unknown":
      return { verdict: "unknown", text: `${name}: its insulation from mains is not known.` };
    case "none":
      return { verdict: "fail", text: `${name} has no insulation from mains: what it feeds is mains.` };
    default:
      return {
        verdict: "fail",
        text: `${name} has only ${grade} insulation from mains; double or reinforced is needed.`,
      };
  }
}

function judgePart(
  name: string,
  earthed: Verdict3,
  part: {
    clearanceMm: number | null;
    creepageMm: number | null;
    reinforcedFromMains: "yes" | "no" | "unknown";
  },
  needed: { clearanceMm: number; creepageMm: number } | null,
): { verdict: Verdict3; text: string } {
  const bonded = earthed === "pass";
  if (earthed === "unknown" && part.reinforcedFromMains !== "yes") {
    return {
      verdict: "unknown",
      text: `Whether ${name} is well bonded to earth is not known, and it is not known to be double insulated from mains.`,
    };
  }
  if (!bonded && part.reinforcedFromMains === "no") {
    return { verdict: "fail", text: `${name} is neither bonded to earth nor double insulated from mains.` };
  }
  if (!bonded && part.reinforcedFromMains === "unknown") {
    return {
      verdict: "unknown",
      text: `${name} is not bonded to earth, and whether it is double insulated from mains is not known.`,
    };
  }
  if (needed === null)
    return {
      verdict: "unknown",
      text: `${name}: the distances for this voltage and height are outside the tables.`,
    };
  const asked = `${figure(needed.clearanceMm)} mm through air and ${figure(needed.creepageMm)} mm over surfaces`;
  if (part.clearanceMm === null || part.creepageMm === null) {
    return {
      verdict: "unknown",
      text: `${name}: its distances to mains parts are not known; ${asked} are needed.`,
    };
  }
  const enough = part.clearanceMm >= needed.clearanceMm && part.creepageMm >= needed.creepageMm;
  return {
    verdict: enough ? "pass" : "fail",
    text: `${name} is ${figure(part.clearanceMm)} mm through air and ${figure(part.creepageMm)} mm over surfaces from mains parts; ${asked} are needed.`,
  };
}
