import { describe, expect, it } from 'vitest';
import { regionLevels, spectrumFigures } from '../../../server/signal/region-figures.ts';
import { regionSpectrum } from '../../../server/signal/region-spectrum.ts';
import regions from '../../reference/regions.json' with { type: 'json' };
import { makeReferenceSignal, REFERENCE_RATE_HZ } from '../../reference/spectra-reference.ts';
import { sine } from '../../support/wav/signals.ts';

const signal = makeReferenceSignal(65_536);

describe('the spectrum of a region', () => {
  for (const kind of ['long', 'short'] as const) {
    const wanted = regions[kind];
    const samples = signal.subarray(wanted.startSample, wanted.endSample);

    it(`has the lines and the levels that scipy gives a ${kind} span`, () => {
      const spectrum = regionSpectrum(samples, REFERENCE_RATE_HZ)!;
      expect(spectrum.method).toBe(kind === 'long' ? 'welch' : 'single-frame');
      expect(spectrum.density).toHaveLength(wanted.lines);
      expect(spectrum.binHz).toBeCloseTo(wanted.binHz, 9);
      for (const [line, levelDb] of Object.entries(wanted.densityDbPerHz))
        expect(Math.abs(10 * Math.log10(spectrum.density[Number(line)]!) - levelDb)).toBeLessThan(0.01);
      const figures = { ...regionLevels(samples), ...spectrumFigures(spectrum) };
      expect(figures.peakFrequencyHz).toBeCloseTo(wanted.peakFrequencyHz, 6);
      for (const name of ['rmsDb', 'peakDb', 'crestDb'] as const)
        expect(Math.abs(figures[name]! - wanted[name])).toBeLessThan(1e-4);
      expect(Math.abs(figures.centroidHz! - wanted.centroidHz)).toBeLessThan(0.5);
      expect(Math.abs(figures.shareAbove20kHz! - wanted.shareAbove20kHz)).toBeLessThan(1e-5);
    });
  }

  it('adds up to the mean square of the span', () => {
    const samples = sine(50_000, 31_000, REFERENCE_RATE_HZ, 0.1);
    const { density, binHz, averages } = regionSpectrum(samples, REFERENCE_RATE_HZ)!;
    const meanSquare = density.reduce((sum, power) => sum + power, 0) * binHz;
    expect(meanSquare / 0.005).toBeCloseTo(1, 4);
    expect(averages).toBe(23);
  });

  it('has none for fewer than eight samples, and no figures in silence', () => {
    expect(regionSpectrum(new Float32Array(7), 48_000)).toBeNull();
    const none = { peakFrequencyHz: null, centroidHz: null, shareAbove20kHz: null };
    expect(spectrumFigures(regionSpectrum(new Float32Array(5000), 48_000))).toEqual(none);
    expect(spectrumFigures(null)).toEqual(none);
    expect(regionLevels(new Float32Array(4))).toEqual({ rmsDb: null, peakDb: null, crestDb: null });
  });

  it('tells no share above 20 kHz where the rate ends below', () => {
    const figures = spectrumFigures(regionSpectrum(sine(5000, 1000, 32_000, 0.5), 32_000));
    expect(figures.shareAbove20kHz).toBeNull();
    expect(Math.abs(figures.peakFrequencyHz! - 1000)).toBeLessThan(16);
  });
});
