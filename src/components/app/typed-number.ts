const GROUPING = /[\s\u00A0\u202F_]/g;

/**
 * Reads a number as people type it: comma or point as decimal sign, spaces between groups, a real minus sign,
 * exponents. Empty text is null; anything else that is not a finite number is undefined.
 */
export function readTypedNumber(text: string): number | null | undefined {
  const plain = text.replace(GROUPING, '').replace('\u2212', '-').replace(',', '.');
  if (plain === '') return null;
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain)) return undefined;
  const value = Number(plain);
  return Number.isFinite(value) ? value : undefined;
}
