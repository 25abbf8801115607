import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { seededGaussian, seededRandom } from '../../../shared/lib/seeded-random.ts';
import { findRecalescences } from '../../../server/signal/recalescence.ts';
import { freezingTrace, type TemperatureTruth } from './synthetic-temperature.ts';

function drawn(
  seconds: number,
  rateHz: number,
  curve: (timeS: number, noise: () => number) => number,
  seed = 7,
) {
  const noise = seededGaussian(seededRandom(seed));
  const timesS = Float64Array.from({ length: seconds * rateHz }, (_, n) => n / rateHz);
  return { timesS, values: timesS.map((timeS) => curve(timeS, noise)) };
}

const reasonOf = (trace: ReturnType<typeof drawn>, meltingPointC: number | null = 0) =>
  findRecalescences(trace, meltingPointC).reason;

/** Onsets are held to twice their own uncertainty, which for one step between readings is more than the step. */
function expectFound(truth: TemperatureTruth, meltingPointC: number | null) {
  const { trace, onsetS, nucleationC } = freezingTrace(truth);
  const { found, reason } = findRecalescences(trace, meltingPointC);
  expect({ reason, jumps: found.length, truth }).toEqual({ reason: null, jumps: 1, truth });
  const jump = found[0]!;
  expect(Math.abs(jump.onsetS - onsetS)).toBeLessThan(2 * jump.onsetUncertaintyS);
  const { lagS = 0.1, coolingKPerS = 0.5, noiseK = 0.02, meltingC = 0, rateHz = 50 } = truth;
  // A sensor that lags shows the temperature of a lag ago.
  const lagK = (lagS + 1 / rateHz) * coolingKPerS;
  expect(Math.abs(jump.nucleationC - nucleationC)).toBeLessThan(lagK + 1.5 * noiseK + 0.02);
  expect(Math.abs(jump.plateauC - meltingC)).toBeLessThan(0.05 + 0.5 * noiseK);
  return jump;
}

describe('a jump back to the melting point', () => {
  test.each<TemperatureTruth>([
    {},
    { rateHz: 1, coolingKPerS: 0.05, lagS: 0.5 },
    { rateHz: 10, lagS: 1 },
    { rateHz: 1000, lagS: 0.02 },
    { rateHz: 1000, lagS: 0.3, noiseK: 0.2 },
    { rateHz: 50, noiseK: 0.3 },
    { rateHz: 5, supercoolingK: 2, noiseK: 0.05, lagS: 0.3 },
    { rateHz: 10, meltingC: 613, startC: 640, supercoolingK: 3, coolingKPerS: 0.3, lagS: 0.5, noiseK: 0.05 },
    { lagS: 0 },
  ])('is found where it was, within its uncertainty: %o', (truth) => {
    for (let seed = 1; seed <= 8; seed++) {
      expectFound({ ...truth, seed }, truth.meltingC ?? 0);
      expectFound({ ...truth, seed }, null);
    }
  });

  test('is measured on its own points in a long, fast trace', () => {
    const jump = expectFound({ rateHz: 20_000, lagS: 0.005, seed: 3 }, 0);
    expect(jump.onsetUncertaintyS).toBeLessThan(0.001);
  });

  test('is found at any supercooling, rate, noise and lag in which it stands out', () => {
    const truths = fc.record({
      rateHz: fc.constantFrom(2, 10, 50, 200),
      supercoolingK: fc.double({ min: 4, max: 20, noNaN: true }),
      coolingKPerS: fc.constantFrom(0.05, 0.2, 0.5),
      lagS: fc.double({ min: 0.02, max: 0.5, noNaN: true }),
      noiseK: fc.double({ min: 0.001, max: 0.1, noNaN: true }),
      seed: fc.integer({ min: 1, max: 1e6 }),
    });
    const found = (truth: TemperatureTruth) => {
      const { trace, onsetS } = freezingTrace({ startC: 1, ...truth });
      const [jump, ...others] = findRecalescences(trace, 0).found;
      expect(others).toEqual([]);
      expect(Math.abs(jump!.onsetS - onsetS)).toBeLessThan(3 * jump!.onsetUncertaintyS);
    };
    fc.assert(fc.property(truths, found), { numRuns: 60, seed: 41 });
  });

  test('is found each time it happens', () => {
    const one = freezingTrace({ supercoolingK: 6 }).trace;
    const lengthS = one.timesS.at(-1)! + 0.02;
    const timesS = Float64Array.from([...one.timesS, ...one.timesS.map((timeS) => timeS + lengthS + 30)]);
    const values = Float64Array.from([...one.values, ...one.values]);
    expect(findRecalescences({ timesS, values }, 0).found).toHaveLength(2);
  });

  test('is found where the trace begins when the liquid is supercooled already', () => {
    const { trace, onsetS } = freezingTrace({ coolingKPerS: 0.02, startC: -7.5, supercoolingK: 8 });
    const { found } = findRecalescences(trace, 0);
    expect(found.map((jump) => Math.abs(jump.onsetS - onsetS) < 0.1)).toEqual([true]);
  });
});

describe('no jump', () => {
  test('in a temperature that stays, whatever the seed', () => {
    for (let seed = 1; seed <= 20; seed++)
      expect(reasonOf(drawn(500, 10, (_, noise) => -5 + 0.3 * noise(), seed))).toBe('flat');
  });

  test('in one that only cools, also where it was written in tenths', () => {
    expect(reasonOf(drawn(500, 10, (timeS, noise) => 20 - 0.1 * timeS + 0.1 * noise()))).toBe('no-rise');
    const inTenths = (timeS: number, noise: () => number) =>
      Math.round((20 - 0.05 * timeS + 0.1 * noise()) * 10) / 10;
    expect(reasonOf(drawn(500, 10, inTenths))).toBe('no-rise');
  });

  test('in one that melts, even after cooling', () => {
    const melting = (timeS: number, noise: () => number) =>
      Math.min(0, -10 + 0.05 * timeS) + Math.max(0, 0.05 * (timeS - 350)) + 0.02 * noise();
    expect(reasonOf(drawn(500, 10, melting))).toBe('never-cools');
    const coolsThenMelts = (timeS: number, noise: () => number) =>
      (timeS < 100 ? -0.1 * timeS : Math.min(0, -10 + 0.1 * (timeS - 100))) + 0.03 * noise();
    expect(reasonOf(drawn(400, 10, coolsThenMelts))).toBe('too-slow');
  });

  test('in a single spike of the electronics', () => {
    const spiked = drawn(500, 10, (timeS, noise) => 10 - 0.05 * timeS + 0.02 * noise());
    spiked.values[2500]! += 30;
    expect(reasonOf(spiked)).toBe('no-rise');
  });

  test('in a heater that warms it past the melting point', () => {
    const heated = (timeS: number, noise: () => number) =>
      (timeS < 100 ? 4 - 0.1 * timeS : Math.min(20, -6 + 5 * (timeS - 100))) + 0.05 * noise();
    expect(reasonOf(drawn(200, 10, heated))).toBe('past-melting');
  });

  test('in a jump of liquid that was not supercooled', () => {
    const { trace } = freezingTrace({ meltingC: 10, startC: 14 });
    expect(findRecalescences(trace, 0).reason).toBe('not-supercooled');
  });

  test('in a handful of points', () => {
    expect(reasonOf(drawn(5, 1, (timeS) => -timeS))).toBe('too-short');
    expect(findRecalescences({ timesS: new Float64Array(), values: new Float64Array() }, 0).reason).toBe(
      'too-short',
    );
  });

  test('and no error in whatever finite numbers come', () => {
    const value = fc.double({ min: -1e6, max: 1e6, noNaN: true });
    const points = fc.array(fc.tuple(fc.double({ min: 0, max: 10, noNaN: true }), value), { maxLength: 200 });
    fc.assert(
      fc.property(points, fc.option(value), (pairs, meltingPointC) => {
        let timeS = 0;
        const timesS = Float64Array.from(pairs, ([stepS]) => (timeS += stepS));
        const values = Float64Array.from(pairs, ([, held]) => held);
        for (const jump of findRecalescences({ timesS, values }, meltingPointC).found) {
          expect(Number.isFinite(jump.onsetS) && jump.onsetUncertaintyS >= 0).toBe(true);
          expect(jump.onsetS).toBeGreaterThanOrEqual(timesS[0]! - 1e-9);
          expect(jump.endS).toBeLessThanOrEqual(timesS.at(-1)! + 1e-9);
        }
      }),
      { numRuns: 500, seed: 42 },
    );
  });
});
