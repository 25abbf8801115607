import type { Place, QualityFinding } from '../../shared/contract/measurement.ts';

export const MAXIMUM_PLACES = 50;

export function finding(
  code: QualityFinding['code'],
  weight: QualityFinding['weight'],
  sentence: string,
  count: number,
  places: Place[] = [],
): QualityFinding {
  return { code, weight, sentence, count, places: places.slice(0, MAXIMUM_PLACES) };
}

export function counted(count: number, one: string, many: string): string {
  return `${count.toLocaleString('en')} ${count === 1 ? one : many}`;
}
