import { medianOf, type Spread } from './ratios.ts';

/** Three figures of which the first is not zero. */
export function short(value: number): string {
  if (!Number.isFinite(value)) return 'unknown';
  if (value !== 0 && Math.abs(value) < 0.001) return value.toExponential(1);
  return value.toLocaleString('en', { maximumSignificantDigits: 3, useGrouping: Math.abs(value) >= 10_000 });
}

export function seconds(values: readonly number[]): string {
  return `${short(medianOf(values))} s`;
}

export function megabytes(value: number): string {
  return `${value.toFixed(0)} MB`;
}

/** The median with the least and the greatest: the machine is never alone. */
export function times({ least, median, most }: Spread): string {
  return `${short(median)} x (${short(least)}-${short(most)})`;
}
