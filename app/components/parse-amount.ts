/**
 * A number as people type it: with a decimal point or comma, with spaces between thousands, with a real minus sign.
 * Null for anything else, also for two separators (1,000.5 could be read in two ways).
 */
export function parseAmount(text: string): number | null {
  const plain = text.replace(/[\s\u00a0\u202f]/g, "").replace("−", "-");
  if (!/^-?(\d+([.,]\d*)?|[.,]\d+)(e-?\d{1,2})?$/i.test(plain)) return null;
  const amount = Number(plain.replace(",", "."));
  return Number.isFinite(amount) ? amount : null;
}
