import type { Reason } from "./bench-check";
import type { Circuit } from "./circuit";
import { figure } from "./figure";
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
