import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { risingPlaces, writeKeys } from '../../../../server/features/recordings/candidate-order.ts';

type Value = number | null;

/** The same by comparing: those without a value last, equal ones as they stand. */
function placesByComparing(values: readonly Value[], isDescending: boolean): number[] {
  return values
    .map((_value, place) => place)
    .sort((a, b) => {
      const [left, right] = [values[a] ?? null, values[b] ?? null];
      if (left === null || right === null) return Number(left === null) - Number(right === null) || a - b;
      return (isDescending ? right - left : left - right) || a - b;
    });
}

function placesOf(values: readonly Value[], isDescending: boolean): number[] {
  const keys = new Float64Array(values.length);
  writeKeys(keys, values, isDescending);
  return [...risingPlaces(keys)];
}

describe('the order of values', () => {
  const doubles = fc.double({ noNaN: true, noDefaultInfinity: true });

  test('is that of comparing them, either way, whatever doubles they are', () => {
    fc.assert(
      fc.property(fc.array(fc.option(doubles)), fc.boolean(), (values, isDescending) => {
        expect(placesOf(values, isDescending)).toEqual(placesByComparing(values, isDescending));
      }),
    );
  });

  test('leaves equal ones as they stand, both zeros included', () => {
    const few = fc.constantFrom<Value>(0, -0, 1, -1, 12.25, null);
    fc.assert(
      fc.property(fc.array(few, { maxLength: 60 }), fc.boolean(), (values, isDescending) => {
        expect(placesOf(values, isDescending)).toEqual(placesByComparing(values, isDescending));
      }),
    );
  });

  test('of a part of an array reads that part alone', () => {
    const keys = Float64Array.from([9, 3, 1, 2, -5]);
    expect([...risingPlaces(keys.subarray(1, 4))]).toEqual([1, 2, 0]);
  });
});
