import type { Circuit, Domain, Supply } from "./circuit";
import type { Citation } from "./rule-set";
import { stackOf } from "./series";
import type { UnitFacts } from "./unit-facts";

/**
 * What a voltage means for a person: "touchable" may be touched when dry; "guarded" is extra-low voltage that must not be
 * touched; "hazardous" is no extra-low voltage at all; "unknown" when the voltage is not known.
 */
export type VoltageClass = "touchable" | "guarded" | "hazardous" | "unknown";

/** Largest voltage that may be touched without basic protection when dry, V. */
export const touchableVolts = { alternating: 25, direct: 60 } as const;
/** Largest extra-low voltage, V (rms where it alternates). */
export const extraLowVolts = { alternating: 50, direct: 120 } as const;

export const touchableCitation: Citation = {
  standard: "IEC 61140",
  clause: "touchable without basic protection, dry: 25 V AC, 60 V DC",
  edition: "not checked",
  mark: "V",
  note: "Extra-low voltage ends at 50 V AC and 120 V ripple-free DC.",
};

const currentOf = (domain: Domain) => (domain === "dc" ? "direct" : "alternating");

export function classOfVolts(domain: Domain, volts: number | null): VoltageClass {
  if (domain === "mains") return "hazardous";
  if (volts === null) return "unknown";
  const kind = currentOf(domain);
  if (volts <= touchableVolts[kind]) return "touchable";
  return volts <= extraLowVolts[kind] ? "guarded" : "hazardous";
}

/** Class of a supply with everything that can come to lie in series with it. */
export function classOfSupply(circuit: Circuit, supply: Supply, facts: UnitFacts): VoltageClass {
  return classOfVolts(supply.domain, stackOf(circuit, supply, facts).volts);
}
