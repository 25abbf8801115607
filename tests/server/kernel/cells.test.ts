import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import type { CellTable } from '../../../server/signal/frame-engine.ts';
import { packageEngine } from '../../../server/signal/package-engine.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';

const kernel = kernelEngine();
const other = packageEngine();
const noise = whiteNoiseSignal(4096, 0.1, 1);

function listed({ count, samples, sums, squares, minima, maxima }: CellTable) {
  return {
    samples: [...samples.subarray(0, count)],
    sums: [...sums.subarray(0, count)],
    squares: [...squares.subarray(0, count)],
    minima: [...minima.subarray(0, count)],
    maxima: [...maxima.subarray(0, count)],
  };
}

describe('cells of 256 samples', () => {
  const summers = [kernel.cellSummer(20), other.cellSummer(20)] as const;

  it('are cut, bounded and summed as the other engine does, wherever a block begins and ends', () => {
    fc.assert(
      fc.property(
        fc.nat(4096),
        fc.nat(4096),
        fc.nat(1000),
        fc.constantFrom(0, 0.2, -0.9),
        (a, b, startSample, offset) => {
          const samples = noise.map((x) => x + offset);
          const range = { from: Math.min(a, b), to: Math.max(a, b), startSample };
          const [found, wanted] = summers.map((summer) => listed(summer(samples, range)));
          expect(found!.samples).toEqual(wanted!.samples);
          expect(found!.minima).toEqual(wanted!.minima);
          expect(found!.maxima).toEqual(wanted!.maxima);
          // Sums of float32 in another order: some units in the last place of a double.
          for (const [c, sum] of wanted!.sums.entries()) expect(found!.sums[c]! - sum).toBeCloseTo(0, 11);
          for (const [c, sum] of wanted!.squares.entries())
            expect(found!.squares[c]! - sum).toBeCloseTo(0, 11);
        },
      ),
    );
  });

  it('have exact sums for integer samples of 24 bits', () => {
    const integers = noise.map((x) => Math.round(x * 2 ** 23));
    const samples = integers.map((x) => x / 2 ** 23);
    const { sums } = summers[0](samples, { from: 0, to: 4096, startSample: 0 });
    for (let c = 0; c < 16; c++) {
      const exact = integers.subarray(c * 256, (c + 1) * 256).reduce((sum, x) => sum + x, 0);
      expect(sums[c]).toBe(exact / 2 ** 23);
    }
  });

  it('refuse more cells than they have room for', () => {
    const samples = new Float32Array(256 * 21);
    for (const summer of summers) {
      expect(() => summer(samples, { from: 0, to: samples.length, startSample: 0 })).toThrow(RangeError);
    }
  });
});

describe('sums of blocks', () => {
  it.each([1, 3, 4, 11, 48, 250])('of %d samples are those of the other engine', (length) => {
    const count = Math.floor(4000 / length);
    const found = kernel.blockSummer(length, count)(noise, 5, count);
    const wanted = other.blockSummer(length, count)(noise, 5, count);
    expect(found).toHaveLength(count);
    for (const [b, sum] of wanted.entries()) expect(found[b]! - sum).toBeCloseTo(0, 13);
  });

  it('refuse more than there is', () => {
    for (const engine of [kernel, other]) {
      expect(() => engine.blockSummer(10, 100)(noise.subarray(0, 95), 0, 10)).toThrow(RangeError);
    }
  });
});
