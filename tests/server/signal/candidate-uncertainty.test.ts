import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { isDrawnPlace, mixDrawn, uncertaintyOf } from '../../../server/signal/candidate-uncertainty.ts';
import { drawOrder } from '../../../shared/lib/seeded-draw.ts';

describe('how uncertain a candidate is', () => {
  it('halves with every 3 dB above the weakest', () => {
    const values = uncertaintyOf({ snrDb: [8, 11, 14, 38], shareAcross: [null, null, null, null] });
    expect([...values]).toEqual([1, 0.5, 0.25, 2 ** -10]);
  });

  it('is greatest where the energy lies half above, half below the hearing line', () => {
    const values = uncertaintyOf({ snrDb: [8, 38, 38, 38], shareAcross: [null, 0.5, 0.75, 0.99] });
    expect(values[1]).toBe(1);
    expect(values[2]).toBe(0.5);
    expect(values[3]).toBeCloseTo(0.02, 9);
  });

  it('is greatest where no strength is told', () => {
    expect([...uncertaintyOf({ snrDb: [null, 20], shareAcross: [null, null] })]).toEqual([1, 1]);
  });
});

describe('a mixed order', () => {
  const chosen = Uint32Array.from({ length: 101 }, (_value, rank) => 100 - rank);

  it('has every candidate once and the chosen ones in their order', () => {
    const mixed = mixDrawn(chosen, 7);
    expect([...mixed].sort((a, b) => a - b)).toEqual([...chosen].reverse());
    const kept = [...mixed].filter((_place, rank) => !isDrawnPlace(rank));
    expect(kept).toEqual([...kept].sort((a, b) => b - a));
  });

  it('draws every fourth from all of them, the same for the same seed', () => {
    const drawnOf = (seed: number) =>
      [...mixDrawn(chosen, seed)].filter((_place, rank) => isDrawnPlace(rank));
    expect(drawnOf(7)).toEqual(drawnOf(7));
    expect(drawnOf(7)).not.toEqual(drawnOf(8));
    const first = Array.from({ length: 400 }, (_value, seed) => mixDrawn(chosen, seed)[3]!);
    const mean = first.reduce((sum, place) => sum + place, 0) / first.length;
    // Of 98 left, uniform: mean 48.5, standard error of 400 draws 1.4.
    expect(Math.abs(mean - 48.5)).toBeLessThan(5);
  });

  it('of drawn numbers has each once', () => {
    fc.assert(
      fc.property(fc.nat(200), fc.integer(), (count, seed) => {
        expect([...drawOrder(count, seed)].sort((a, b) => a - b)).toEqual(
          Array.from({ length: count }, (_value, place) => place),
        );
      }),
    );
  });
});
