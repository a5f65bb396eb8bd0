/** A number as a person would write it on a record: four significant figures, no exponent in usual ranges. */
export function figure(value: number): string {
  if (value === 0) return "0";
  const text = Number(value.toPrecision(4));
  return Math.abs(text) >= 1e-4 && Math.abs(text) < 1e7 ? String(text) : value.toExponential(3);
}
