import fc from 'fast-check';
import { afterAll, describe, expect, it } from 'vitest';
import { openKernelOctaves } from '../../../server/kernel/kernel-octaves.ts';
import { OctaveTree } from '../../../server/signal/band-energy.ts';
import { createDetector } from '../../../server/signal/detector.ts';
import type { Held, OctaveArithmetic } from '../../../server/signal/octave-arithmetic.ts';
import { plainOctaves } from '../../../server/signal/plain-octaves.ts';
import { clickScene, seededNormal, seededUniform } from '../signal/synthetic-clicks.ts';

const kernel = openKernelOctaves();
afterAll(() => kernel.close());

/** Runs the same on both engines and compares every array it opens, to the bit, and what it returns. */
function expectSame(
  work: (arithmetic: OctaveArithmetic, numbers: (count: number) => number[]) => number,
  seed: number,
) {
  const [found, wanted] = [kernel.arithmetic, plainOctaves].map((arithmetic) => {
    const opened: Held<Float32Array | Float64Array | Int32Array>[] = [];
    const noted = <T extends (typeof opened)[number]>(held: T): T => {
      opened.push(held);
      return held;
    };
    const normal = seededNormal(seededUniform(seed));
    const returned = work(
      {
        ...arithmetic,
        floats: (length) => noted(arithmetic.floats(length)),
        doubles: (length) => noted(arithmetic.doubles(length)),
        integers: (length) => noted(arithmetic.integers(length)),
      },
      (count) => Array.from({ length: count }, () => normal()),
    );
    return { returned, arrays: opened.map(({ values }) => bytesOf(values)) };
  });
  expect(found).toEqual(wanted);
}

function bytesOf({ buffer, byteOffset, byteLength }: Float32Array | Float64Array | Int32Array): string {
  return Buffer.from(buffer, byteOffset, byteLength).toString('hex');
}

const seeds = fc.integer({ min: 1, max: 1e9 });
const runs = { numRuns: 60 };

describe('octaves on the kernel, to the bit as in plain arithmetic', () => {
  it('split off the upper half from any place on, whatever was before', () => {
    const places = fc.tuple(fc.nat(9), fc.nat(9), fc.nat(40), seeds);
    fc.assert(
      fc.property(places, ([from, lowFrom, quads, seed]) => {
        expectSame((arithmetic, numbers) => {
          const split = {
            input: arithmetic.floats(from + 4 * quads + 3),
            low: arithmetic.floats(lowFrom + 2 * quads + 3),
            lowerHalf: arithmetic.doubles(quads + 1),
            upperHalf: arithmetic.doubles(quads + 1),
            state: arithmetic.doubles(12),
          };
          for (const { values } of [split.input, split.low, split.state]) values.set(numbers(values.length));
          arithmetic.splitUpperHalf(split, from, quads, lowFrom);
          arithmetic.splitUpperHalf(split, from, quads, lowFrom);
          return 0;
        }, seed);
      }),
      runs,
    );
  });

  it('split a half into quarters, each into its column', () => {
    const columns = fc.constantFrom([7, 6, 4, 5] as const, [0, 1, 3, 2] as const);
    fc.assert(
      fc.property(columns, fc.nat(40), seeds, (into, quads, seed) => {
        expectSame((arithmetic, numbers) => {
          const split = {
            input: arithmetic.doubles(4 * quads),
            energies: arithmetic.doubles(8 * (quads + 1)),
            columns: into,
            state: arithmetic.doubles(18),
          };
          for (const { values } of [split.input, split.energies, split.state])
            values.set(numbers(values.length));
          arithmetic.splitQuarters(split, quads);
          return 0;
        }, seed);
      }),
      runs,
    );
  });

  it('add up cells and look for windows over limits in any stretch of them', () => {
    const past = 64;
    const cells = 48;
    const stretch = fc.tuple(fc.nat(cells), fc.nat(cells), fc.nat(63), fc.integer({ min: -33, max: cells }));
    const steps = fc.array(fc.constantFrom(0.3, 1, 2, Infinity), { minLength: 20, maxLength: 20 });
    fc.assert(
      fc.property(stretch, steps, seeds, ([a, b, phase, validFrom], limitSteps, seed) => {
        const [from, to] = [Math.min(a, b), Math.max(a, b)];
        expectSame((arithmetic, numbers) => {
          const energies = arithmetic.doubles(16 * cells);
          const sums = arithmetic.doubles(8 * (past + cells));
          const gains = arithmetic.doubles(8);
          const limits = arithmetic.doubles(20);
          const hits = arithmetic.integers(5 * cells);
          energies.values.set(numbers(16 * cells).map((value) => value * value));
          sums.values.set(numbers(8 * (past + cells)));
          gains.values.set(numbers(8).map(Math.abs));
          // About what the windows of so many cells and columns have.
          limits.values.set(limitSteps.map((step, k) => step * 2 ** ((k >> 2) + 2 + (k & 3))));
          arithmetic.addCells({ energies, sums, gains, past }, from, to);
          return arithmetic.scanCells({ sums, past, limits, hits }, { from, to, phase, validFrom });
        }, seed);
      }),
      { numRuns: 200 },
    );
  });

  it('look for windows over a limit in the samples of both halves', () => {
    const count = 40;
    const gains = fc.tuple(fc.constantFrom(0, 0.5, 2), fc.constantFrom(0, 0.7, 1), fc.constantFrom(1, 6, 12));
    fc.assert(
      fc.property(fc.nat(count), fc.nat(count), gains, seeds, (a, b, [lowerGain, upperGain, limit], seed) => {
        const [from, to] = [Math.min(a, b), Math.max(a, b)];
        expectSame((arithmetic, numbers) => {
          const lowerHalf = arithmetic.doubles(4 * count);
          const upperHalf = arithmetic.doubles(4 * count);
          const hits = arithmetic.integers(4 * count);
          for (const { values } of [lowerHalf, upperHalf]) values.set(numbers(values.length));
          return arithmetic.scanHalves(
            { lowerHalf, upperHalf, hits },
            { from, to, lowerGain, upperGain, limit },
          );
        }, seed);
      }),
      { numRuns: 200 },
    );
  });

  it('are the same tree, also where memory grows after a part of it is set up', () => {
    expectSame((arithmetic, numbers) => {
      const options = { sampleRateHz: 48_000, octaves: 5, blockSamples: 512, heldSamples: 3000 };
      const tree = new OctaveTree({ arithmetic, ...options });
      arithmetic.doubles(1 << 17);
      for (let block = 0; block < 12; block++) tree.process(Float32Array.from(numbers(tree.blockSamples)));
      return tree.blockSamples;
    }, 4);
  });

  it('give the detector the same candidates', () => {
    const { samples } = clickScene({
      sampleRateHz: 96_000,
      seconds: 3,
      seed: 21,
      ratePerSecond: 15,
      snrDb: [8, 30],
      frequencyHz: [3000, 40_000],
      cycles: [8, 60],
    });
    const [found, wanted] = [kernel.arithmetic, plainOctaves].map((arithmetic) => {
      const context = { fullScaleV: null, preampGainDb: null, observableLowHz: 0, observableHighHz: 43_200 };
      const detector = createDetector({ sampleRateHz: 96_000, channel: 0, arithmetic, context });
      detector.push(samples);
      return detector.finish();
    });
    expect(wanted?.length).toBeGreaterThan(20);
    expect(found).toEqual(wanted);
  });

  it('refuse arrays of another memory', () => {
    const energies = { values: new Float64Array(16) };
    const rest = { sums: energies, gains: energies, past: 0 };
    expect(() => kernel.arithmetic.addCells({ energies, ...rest }, 0, 1)).toThrow(TypeError);
  });
});
