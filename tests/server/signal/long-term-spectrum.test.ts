import { describe, expect, it } from 'vitest';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';
import { LongTermSpectrum, type LongTermSpectra } from '../../../server/signal/long-term-spectrum.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { makeReferenceSignal, REFERENCE_RATE_HZ, spectra } from '../../reference/spectra-reference.ts';

function spectraOf(
  samples: Float32Array,
  { size = 2048, sampleRateHz = 192_000, maximumPoints = 1024 } = {},
): LongTermSpectra {
  const longTerm = new LongTermSpectrum({ size, sampleRateHz, maximumPoints });
  const frame = new FrameSpectrum(size);
  for (let from = 0; from + size <= samples.length; from += size / 2) {
    frame.analyse(samples, from, from + size);
    const energy = frame.isSilent ? Number.NaN : longTerm.energyOf(frame.power);
    longTerm.push(frame.power, frame.power.length, Float64Array.of(energy));
  }
  return longTerm.finish();
}

function meanSquareOf(spectrum: { frequenciesHz: number[] }, densities: number[]): number {
  const stepHz = spectrum.frequenciesHz[1]! - spectrum.frequenciesHz[0]!;
  return densities.reduce((sum, db) => sum + 10 ** (db / 10) * stepHz, 0);
}

describe('long-term spectra', () => {
  it('have a mean that agrees with scipy.signal.welch', () => {
    const found = spectraOf(makeReferenceSignal(65_536), { sampleRateHz: REFERENCE_RATE_HZ });
    for (const [bin, expectedDb] of Object.entries(spectra.welchDbPerHz)) {
      expect(Math.abs(found.meanDbPerHz[Number(bin) - 1]! - expectedDb)).toBeLessThan(0.02);
    }
    for (const [bin, hz] of Object.entries(spectra.welchHz)) {
      expect(found.frequenciesHz[Number(bin) - 1]).toBeCloseTo(hz, 6);
    }
  });

  it('integrate to the mean square of white noise, pooled or not', () => {
    const noise = whiteNoiseSignal(400_000, 0.1, 7);
    for (const maximumPoints of [1024, 256]) {
      const found = spectraOf(noise, { maximumPoints });
      expect(found.frequenciesHz.length).toBeLessThanOrEqual(maximumPoints);
      expect(meanSquareOf(found, found.meanDbPerHz)).toBeCloseTo(0.01, 3);
    }
  });

  it('put the density of white noise at rms² over half the rate; the median lies 1.6 dB lower', () => {
    const found = spectraOf(whiteNoiseSignal(2_000_000, 0.1, 8));
    const expectedDb = 10 * Math.log10(0.01 / 96_000);
    const middle = (values: number[]) => values.slice(100, 900).reduce((sum, db) => sum + db, 0) / 800;
    expect(middle(found.meanDbPerHz)).toBeCloseTo(expectedDb, 0);
    // Median of an exponential distribution: ln 2 of its mean.
    expect(middle(found.medianDbPerHz) - expectedDb).toBeCloseTo(10 * Math.log10(Math.LN2), 0);
  });

  it('part quiet frames from active ones', () => {
    const quiet = whiteNoiseSignal(192_000, 0.001, 9);
    const burst = new Float32Array(192_000);
    burst.set(sine(19_200, 60_000, 192_000, 0.3), 96_000);
    const found = spectraOf(mix(quiet, burst));
    const at60kHz = found.frequenciesHz.findIndex((hz) => hz === 60_000);
    expect(found.activeDbPerHz![at60kHz]! - found.quietDbPerHz[at60kHz]!).toBeGreaterThan(30);
    expect(found.maximumDbPerHz[at60kHz]!).toBeGreaterThanOrEqual(found.activeDbPerHz![at60kHz]!);
  });

  it('know no active frames in steady noise', () => {
    expect(spectraOf(whiteNoiseSignal(192_000, 0.01, 10)).activeDbPerHz).toBeNull();
  });

  it('stay at the floor without any frame', () => {
    const found = spectraOf(new Float32Array(10_000));
    expect(new Set(found.quietDbPerHz)).toEqual(new Set([-200]));
  });
});
