import type { Verdict3 } from "./analysis";
import type { Reason } from "./bench-check";
import type { Circuit } from "./circuit";
import { figure } from "./figure";
import type { Citation, RuleSet } from "./rule-set";
import type { UnitFacts } from "./unit-facts";

/** Current through a capacitor at the supply, mA: 2πfCU. */
export const capacitorMilliamps = (nanofarads: number, volts: number, hertz: number): number =>
  2 * Math.PI * hertz * nanofarads * 1e-9 * volts * 1000;

export interface LeakageSum {
  /** What is known of it, mA. */
  milliamps: number;
  complete: boolean;
  parts: Reason[];
}

/**
 * Sum of the currents to earth: every Y capacitor with full voltage across it, as with an open neutral or a reversed plug,
 * and what supplies and chargers leak by their makers' data.
 */
export function leakageSum({ view }: Circuit, facts: UnitFacts): LeakageSum {
  let milliamps = 0;
  let complete = true;
  const parts: Reason[] = [];
  const add = (id: string, amount: number | null, what: string) => {
    if (amount === null) complete = false;
    else milliamps += amount;
    const text =
      amount === null ? `${view.name(id)}: ${what} is not known.` : `${view.name(id)}: ${figure(amount)} mA.`;
    parts.push({ text, elements: [id], conductors: [] });
  };
  for (const { id, nanofarads } of view.ofKind("y-capacitor")) {
    const amount =
      nanofarads === null ? null : capacitorMilliamps(nanofarads, facts.supplyVolts, facts.supplyHertz);
    add(id, amount, "its capacitance");
  }
  for (const { id, leakageMilliamps } of view.ofKind("isolated-supply"))
    add(id, leakageMilliamps, "its earth leakage");
  for (const { id, supply, leakageMilliamps } of view.ofKind("charger")) {
    if (supply === "mains") add(id, leakageMilliamps, "its earth leakage");
  }
  return { milliamps, complete, parts };
}

export interface LeakageLimit {
  milliamps: number;
  citation: Citation;
  /** What the limit is for, or what is not known and made it the tighter one; in words, for the conditions. */
  notes: string[];
}

/**
 * Largest current in the protective conductor of class I. Held in the hand has a limit of its own; heating appliances have one
 * by their power. Where it is not known which holds, the tighter does, and that is said.
 */
export function earthCurrentLimit({ view }: Circuit, ruleSet: RuleSet, facts: UnitFacts): LeakageLimit {
  const { protectiveConductorCurrent, protectiveConductorCurrentHandheld } = ruleSet.values;
  const ordinary: LeakageLimit = {
    milliamps: protectiveConductorCurrent.value,
    citation: protectiveConductorCurrent.citation,
    notes: [],
  };
  const handheld = facts.handheld ?? null;
  if (handheld !== false && protectiveConductorCurrentHandheld.value < protectiveConductorCurrent.value) {
    return {
      milliamps: protectiveConductorCurrentHandheld.value,
      citation: protectiveConductorCurrentHandheld.citation,
      notes:
        handheld === null
          ? ["Whether it is held in the hand is not stated: the tighter limit is used"]
          : ["Held in the hand"],
    };
  }
  const heaters = view
    .ofKind("load")
    .filter(({ supply, heating }) => supply === "mains" && heating === "yes");
  return heaters.length === 0 ? ordinary : heatingLimit(heaters, ordinary, ruleSet, facts);
}

function heatingLimit(
  heaters: { amps: number | null }[],
  ordinary: LeakageLimit,
  ruleSet: RuleSet,
  facts: UnitFacts,
): LeakageLimit {
  const rule = ruleSet.values.protectiveConductorCurrentHeating;
  const amps = heaters.reduce<number | null>(
    (sum, each) => (sum === null || each.amps === null ? null : sum + each.amps),
    0,
  );
  if (amps === null) {
    const note = "The power of the heating is not known: the tighter limit is used";
    return rule.least.value < ordinary.milliamps
      ? { milliamps: rule.least.value, citation: rule.least.citation, notes: [note] }
      : { ...ordinary, notes: [note] };
  }
  const kilowatts = (amps * facts.supplyVolts) / 1000;
  if (kilowatts <= rule.above.value) return ordinary;
  const milliamps = Math.min(rule.cap.value, Math.max(rule.least.value, kilowatts * rule.perKilowatt.value));
  return {
    milliamps: Number(milliamps.toPrecision(6)),
    citation: rule.perKilowatt.citation,
    notes: [
      `${figure(rule.perKilowatt.value)} mA for each of ${figure(kilowatts)} kW of heating, at least ${figure(rule.least.value)} mA and at most ${figure(rule.cap.value)} mA`,
    ],
  };
}

/** The limit that the class sets: current in the protective conductor for class I, touch current for class II. */
export function leakageLimit(circuit: Circuit, ruleSet: RuleSet, facts: UnitFacts): LeakageLimit {
  const { touchCurrent } = ruleSet.values;
  return facts.protectionClass === "I"
    ? earthCurrentLimit(circuit, ruleSet, facts)
    : { milliamps: touchCurrent.value, citation: touchCurrent.citation, notes: [] };
}

/** What is known of a sum already fails above the limit; it passes only when nothing is missing from it. */
export const judgeLeakage = ({ milliamps, complete }: LeakageSum, limit: LeakageLimit): Verdict3 =>
  milliamps > limit.milliamps ? "fail" : complete ? "pass" : "unknown";
