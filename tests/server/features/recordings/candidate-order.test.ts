import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  mergeNeighbours,
  toRankedSlice,
  type RankedSlice,
} from '../../../../server/features/recordings/candidate-order.ts';

type Value = number | null;

function compareIn(isDescending: boolean) {
  return (a: Value, b: Value): number => {
    if (a === null || b === null) return Number(a === null) - Number(b === null);
    return isDescending ? b - a : a - b;
  };
}

/** Slices of the values as the database gives them: each in order, ordinals rising from slice to slice. */
function slicesOf(values: readonly Value[], size: number, isDescending: boolean): RankedSlice[] {
  const compare = compareIn(isDescending);
  const slices: RankedSlice[] = [];
  for (let from = 0; from < values.length; from += size) {
    const part = values.slice(from, from + size).map((value, index) => ({ value, ordinal: from + index }));
    part.sort((a, b) => compare(a.value, b.value) || a.ordinal - b.ordinal);
    const ordinals = part.map(({ ordinal }) => ordinal);
    slices.push(
      toRankedSlice(
        ordinals,
        part.map(({ value }) => value),
        isDescending,
      ),
    );
  }
  return slices;
}

function mergeAll(slices: RankedSlice[]): number[] {
  let left = slices;
  while (left.length > 1) left = mergeNeighbours(left);
  return [...(left[0]?.ordinals ?? [])];
}

describe('slices in order, merged', () => {
  const value = fc.option(fc.integer({ min: -3, max: 3 }), { nil: null });

  test('give the order of the whole, equal ones by ordinal and those without a value last', () => {
    fc.assert(
      fc.property(
        fc.array(value, { maxLength: 60 }),
        fc.integer({ min: 1, max: 9 }),
        fc.boolean(),
        (values, size, isDescending) => {
          const compare = compareIn(isDescending);
          const sorted = values
            .map((_value, ordinal) => ordinal)
            .sort((a, b) => compare(values[a]!, values[b]!) || a - b);
          expect(mergeAll(slicesOf(values, size, isDescending))).toEqual(sorted);
        },
      ),
    );
  });

  test('halve their number with each step, an odd one kept', () => {
    const slices = slicesOf([5, 4, 3, 2, 1], 1, false);
    expect(mergeNeighbours(slices).map(({ ordinals }) => [...ordinals])).toEqual([[1, 0], [3, 2], [4]]);
  });
});
