import { describe, expect, it } from 'vitest';
import { mix, pinkNoiseSignal, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { contentOf } from './content-of.ts';

describe('what a channel holds', () => {
  const noise = whiteNoiseSignal(2 ** 19, 0.01, 1);

  it.each([8000, 44_100, 192_000, 1_000_000])('has white noise in bands without a gap at %d Hz', (rateHz) => {
    const { bands } = contentOf(noise, rateHz);
    expect(bands[0]!.middleHz).toBeLessThan(220);
    expect(bands.at(-1)!.highHz).toBeGreaterThan(rateHz / 2 / 10 ** 0.1);
    for (const [k, { lowHz, highHz, meanDb }] of bands.entries()) {
      if (k > 0) expect(lowHz).toBeCloseTo(bands[k - 1]!.highHz, 6);
      const expectedDb = 10 * Math.log10((2e-4 * (highHz - lowHz)) / (rateHz / 2));
      const values = 2 * (highHz - lowHz) * (noise.length / rateHz);
      expect(Math.abs(meanDb! - expectedDb)).toBeLessThan(0.6 + 4 * 4.34 * Math.sqrt(2 / values));
    }
  });

  it('has a tone at 800 Hz at its level, in the bands of the reduced signal', () => {
    const { bands } = contentOf(mix(noise, sine(noise.length, 800, 192_000, 0.1)), 192_000);
    const band = bands.find(({ lowHz, highHz }) => lowHz < 800 && highHz > 800)!;
    for (const level of [band.floorDb, band.medianDb, band.meanDb, band.maximumDb]) {
      expect(Math.abs(level! + 20)).toBeLessThan(0.8);
    }
  });

  it('does not depend on segments, but for a frame at each joint', () => {
    const long = pinkNoiseSignal(3 * 2 ** 20, 0.01, 2);
    const whole = contentOf(long, 192_000);
    const joined = contentOf(long, 192_000, { segment: 2 ** 20 });
    expect(joined.pcmSha256).toBe(whole.pcmSha256);
    expect(joined.bits).toEqual(whole.bits);
    for (const [k, band] of joined.bands.entries()) {
      expect(Math.abs(band.medianDb! - whole.bands[k]!.medianDb!)).toBeLessThan(0.4);
    }
  });

  it('is told of the shortest and slowest recordings too', () => {
    for (const rateHz of [1, 48_000, 20_000_000]) {
      const { pcmSha256, speech, bits } = contentOf(Float32Array.of(0.5, -0.5, 0.25), rateHz);
      expect(pcmSha256).toMatch(/^[0-9a-f]{64}$/);
      expect(speech).toEqual(rateHz === 1 ? null : []);
      expect(bits).toMatchObject({ bits: 3, zeroBits: 21 });
    }
  });
});
