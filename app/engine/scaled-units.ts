/**
 * Units that differ only in their prefix, so that a reading can be written down as the instrument shows it (980 kΩ)
 * and still be set against a limit (1 MΩ).
 */

/** Factors of the SI prefixes in use on a bench (BIPM SI Brochure, 9th edition, table 7). */
const families: Record<string, number>[] = [
  { mΩ: 1e-3, Ω: 1, kΩ: 1e3, MΩ: 1e6, GΩ: 1e9 },
  { µA: 1e-6, mA: 1e-3, A: 1 },
  { mV: 1e-3, V: 1, kV: 1e3 },
  { ms: 1e-3, s: 1 },
  { mm: 1e-3, cm: 1e-2, m: 1 },
  { mW: 1e-3, W: 1, kW: 1e3 },
  { pF: 1e-12, nF: 1e-9, µF: 1e-6 },
];

function familyOf(unit: string): Record<string, number> | undefined {
  return families.find((family) => unit in family);
}

/** The units that a reading asked for in `unit` may be written down in, smallest first; at least `unit` itself. */
export function relatedUnits(unit: string): string[] {
  const family = familyOf(unit);
  return family ? Object.keys(family) : [unit];
}

/**
 * A value in another unit of the same family; `null` where the two don't measure the same thing.
 * @example convertUnit(980, "kΩ", "MΩ") // 0.98
 */
export function convertUnit(value: number, from: string, to: string): number | null {
  if (from === to) return value;
  const family = familyOf(from);
  const fromFactor = family?.[from];
  const toFactor = family?.[to];
  if (fromFactor === undefined || toFactor === undefined) return null;
  // Division by a power of ten is exact where multiplication by 0.001 is not.
  return fromFactor >= toFactor
    ? value * Math.round(fromFactor / toFactor)
    : value / Math.round(toFactor / fromFactor);
}
