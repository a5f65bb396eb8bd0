import { class5Citation, conductorOhms } from "./conductor-data";
import { figure } from "./figure";
import type { Citation, RuleSet } from "./rule-set";
import type { UnitFacts } from "./unit-facts";

/** Longest cord in steps: base up to a length, a step for each started further stretch, never above the cap. */
export function steppedEarthLimit(
  lengthM: number,
  {
    base,
    baseLength,
    step,
    stepLength,
    cap,
  }: { base: number; baseLength: number; step: number; stepLength: number; cap: number },
): number {
  const steps = lengthM <= baseLength ? 0 : Math.ceil((lengthM - baseLength) / stepLength - 1e-9);
  return Math.min(cap, base + steps * step);
}

export interface EarthLimit {
  ohms: number;
  /** How it was got, in words. */
  basis: string;
  citations: Citation[];
}

/** Largest protective-earth resistance. Where the cord is not known the tightest value of the profile holds, and that is said. */
export function earthLimit(ruleSet: RuleSet, facts: UnitFacts): EarthLimit {
  const rule = ruleSet.values.protectiveEarth;
  const length = facts.cordLengthM ?? null;
  if (rule.kind === "stepped") {
    const citations = [rule.base.citation];
    if (length === null) {
      return {
        ohms: rule.base.value,
        basis: "cord length not known: the value for the shortest cord",
        citations,
      };
    }
    const area = facts.cordAreaMm2 ?? null;
    if (area !== null && area > rule.largestArea.value + 1e-9) {
      const cord = conductorOhms(area, length);
      return {
        ohms: round(Math.max(rule.floor.value, cord)),
        basis: `${figure(length)} m of ${figure(area)} mm², above ${figure(rule.largestArea.value)} mm²: ${figure(cord)} Ω computed, at least ${figure(rule.floor.value)} Ω`,
        citations: [rule.floor.citation, class5Citation],
      };
    }
    const ohms = steppedEarthLimit(length, {
      base: rule.base.value,
      baseLength: rule.baseLength.value,
      step: rule.step.value,
      stepLength: rule.stepLength.value,
      cap: rule.cap.value,
    });
    return {
      ohms: round(ohms),
      basis: `cord of ${figure(length)} m${area === null ? `, taken as at most ${figure(rule.largestArea.value)} mm²` : ""}`,
      citations,
    };
  }
  const area = facts.cordAreaMm2 ?? null;
  if (length === null || area === null) {
    return {
      ohms: rule.allowance.value,
      basis: "cord not known: the allowance alone, nothing for the cord",
      citations: [rule.allowance.citation],
    };
  }
  return {
    ohms: round(rule.allowance.value + conductorOhms(area, length)),
    basis: `${figure(rule.allowance.value)} Ω and ${figure(conductorOhms(area, length))} Ω for ${figure(length)} m of ${figure(area)} mm²`,
    citations: [rule.allowance.citation, class5Citation],
  };
}

const round = (ohms: number) => Number(ohms.toPrecision(6));
