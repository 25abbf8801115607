import { describe, expect, it } from 'vitest';
import { classicStaLta, recursiveStaLta } from '../../../server/signal/sta-lta.ts';

const energy = Float64Array.from({ length: 600 }, (_, n) => (n < 300 ? 1 : 100));
const windows = { shortSamples: 10, longSamples: 100 };

function placeOfMaximum(values: Float64Array): number {
  return values.indexOf(Math.max(...values));
}

describe('short-term over long-term mean', () => {
  // Values: Allen 1978 and Withers et al. 1998, p. 98, in closed form; computed outside the project.
  it('rises from 1 to 5.477 with the first loud sample and to 9.174 when the short window is full', () => {
    const ratios = classicStaLta(energy, windows);
    expect(ratios[299]).toBeCloseTo(1, 9);
    expect(ratios[300]).toBeCloseTo(5.477387, 6);
    expect(placeOfMaximum(ratios)).toBe(309);
    expect(ratios[309]).toBeCloseTo(9.174312, 6);
  });

  it('rises recursively to 7.151 at sample 303', () => {
    const ratios = recursiveStaLta(energy, windows, 1);
    expect(ratios[300]).toBeCloseTo(5.477387, 6);
    expect(placeOfMaximum(ratios)).toBe(303);
    expect(ratios[303]).toBeCloseTo(7.150814, 5);
  });

  it('says nothing before the long window is full, nor in silence', () => {
    expect(classicStaLta(energy, windows)[98]).toBe(0);
    expect([...classicStaLta(new Float64Array(200), windows)].every((ratio) => ratio === 0)).toBe(true);
  });

  it('refuses a short window that is not shorter', () => {
    expect(() => classicStaLta(energy, { shortSamples: 10, longSamples: 10 })).toThrow(RangeError);
  });
});
