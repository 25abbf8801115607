import Meyda from 'meyda';
import { describe, expect, it } from 'vitest';
import { MEL_BANDS, melBank } from '../../../server/signal/mel-bank.ts';

/** meyda makes a new bank when the number of bands changes, and only then. */
function meydaBank(size: number, sampleRateHz: number): number[][] {
  Object.assign(Meyda, { sampleRate: sampleRateHz, bufferSize: size });
  for (const bands of [20, MEL_BANDS]) {
    Meyda.melBands = bands;
    Meyda.extract('rms', new Float32Array(size));
  }
  return (Meyda as unknown as { melFilterBank: number[][] }).melFilterBank;
}

describe('the mel bank', () => {
  it.each([
    [256, 8000],
    [512, 44_100],
    [512, 48_000],
    [1024, 96_000],
    [2048, 192_000],
    [4096, 384_000],
    [8192, 1_000_000],
    [16_384, 20_000_000],
  ])('is that of meyda without its zeros at N = %d, %d Hz', (size, sampleRateHz) => {
    const wanted = meydaBank(size, sampleRateHz);
    const found = melBank(size, sampleRateHz).map(({ first, weights }) => {
      const row = new Array<number>(size / 2 + 1).fill(0);
      weights.forEach((weight, i) => (row[first + i] = weight));
      return row;
    });
    expect(found).toEqual(wanted);
  });
});
