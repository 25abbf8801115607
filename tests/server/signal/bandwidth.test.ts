import { describe, expect, it } from 'vitest';
import { findBandwidth } from '../../../server/signal/bandwidth.ts';
import codecs from '../../../fixtures/bandwidth/spectra.json' with { type: 'json' };
import { floorSpectrum } from './floor-spectrum.ts';
import { lowPass, mix, pinkNoiseSignal, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

function bandwidthOf(samples: Float32Array, sampleRateHz: number) {
  return findBandwidth(floorSpectrum(samples, sampleRateHz));
}

describe('the effective bandwidth', () => {
  it('is Nyquist for white noise, pink noise and a quiet file with a tone', () => {
    expect(bandwidthOf(whiteNoiseSignal(100_000, 0.01, 1), 48_000)).toMatchObject({
      effectiveHz: 24_000,
      edge: 'none',
    });
    expect(bandwidthOf(pinkNoiseSignal(200_000, 0.01, 2), 192_000).edge).toBe('none');
    const tone = mix(sine(200_000, 60_000, 192_000, 0.5), whiteNoiseSignal(200_000, 1e-5, 3));
    expect(bandwidthOf(tone, 192_000).edge).toBe('none');
  });

  it('is no edge of a pure tone in digital silence', () => {
    expect(bandwidthOf(sine(200_000, 60_000, 192_000, 0.5), 192_000).edge).toBe('none');
  });

  it('is not taken for an edge where the floor falls gently, as a sensor does', () => {
    const white = whiteNoiseSignal(300_000, 0.01, 4);
    let state = 0;
    const rolled = white.map((x) => (state += 0.1 * (x - state)));
    expect(bandwidthOf(rolled, 192_000).edge).toBe('none');
  });

  it.each([
    [16_000, 48_000],
    [18_000, 44_100],
    [20_000, 96_000],
  ])(
    'ends within 1 kHz of a steep filter at %d Hz in a file of %d Hz, and lossy compression is named',
    (cutoffHz, rateHz) => {
      const noise = mix(
        lowPass(whiteNoiseSignal(120_000, 0.01, 5), cutoffHz, rateHz),
        whiteNoiseSignal(120_000, 1e-5, 6),
      );
      const found = bandwidthOf(noise, rateHz);
      expect(found.edge).toBe('brick-wall');
      expect(Math.abs(found.effectiveHz - cutoffHz)).toBeLessThan(1000);
      expect(found.reason).toMatch(/lossy compression/);
    },
  );

  it('finds a file converted from 96 kHz to 192 kHz', () => {
    const noise = mix(
      lowPass(whiteNoiseSignal(200_000, 0.01, 7), 46_500, 192_000),
      whiteNoiseSignal(200_000, 1e-5, 8),
    );
    const found = bandwidthOf(noise, 192_000);
    expect(Math.abs(found.effectiveHz - 46_500)).toBeLessThan(1000);
    expect(found.reason).toMatch(/converted from a sample rate of 96 kHz/);
  });

  it('knows no edge in silence', () => {
    expect(bandwidthOf(new Float32Array(50_000), 48_000).edge).toBe('none');
  });
});

/** Made by tests/bench/bandwidth-accuracy.ts with real codecs and converters (ffmpeg 5.1, SoX 14.4.2). */
describe('the effective bandwidth of files of real codecs and converters', () => {
  // The filter of any converter falls above this: no edge is told there.
  const HIGHEST_SHARE_OF_RATE = 0.46;

  it.each(codecs)('of $name ends within 1 kHz of where it does', (file) => {
    const { isLimited, expectedHz, sampleRateHz, firstHz, stepHz, floorDbPerHz } = file;
    const frequenciesHz = floorDbPerHz.map((_, k) => firstHz + k * stepHz);
    const found = findBandwidth({ sampleRateHz, frequenciesHz, floorDbPerHz });
    expect(Math.abs(found.effectiveHz - expectedHz)).toBeLessThan(1000);
    const isTold = isLimited && expectedHz < HIGHEST_SHARE_OF_RATE * sampleRateHz;
    expect(found.edge).toBe(isTold ? 'brick-wall' : 'none');
  });

  it('is told to 100 Hz, which is as fine as the frames are', () => {
    const stepHz = 93.75;
    const frequenciesHz = Array.from({ length: 255 }, (_, k) => (k + 1) * stepHz);
    const floorDbPerHz = frequenciesHz.map((hz) => (hz < 16_100 ? -100 : -160));
    const { reason } = findBandwidth({ sampleRateHz: 48_000, frequenciesHz, floorDbPerHz });
    expect(reason).toContain('ends at 16 kHz');
  });

  it('is known of codecs of every kind, of converters and of files that nothing was done to', () => {
    for (const words of ['mp3', 'aac', 'opus', 'vorbis', 'Hz to 192000 Hz', 'quiet', 'nothing done']) {
      expect(codecs.some(({ name }) => name.includes(words))).toBe(true);
    }
  });
});
