import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  EffectiveBitsTracker,
  joinEffectiveBits,
  type SampleFormat,
} from '../../../server/signal/effective-bits.ts';
import { pinkNoiseSignal, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

function quantised(samples: Float32Array, bits: number): Float32Array {
  const scale = 2 ** (bits - 1);
  return samples.map((x) => Math.max(-1, Math.min(1 - 1 / scale, Math.round(x * scale) / scale)));
}

function effectiveBits(samples: Float32Array, format: SampleFormat, segment = samples.length) {
  const parts = [];
  for (let from = 0; from < samples.length; from += segment) {
    const tracker = new EffectiveBitsTracker(format);
    const to = Math.min(samples.length, from + segment);
    for (let at = from; at < to; at += 4096) tracker.push(samples, at, Math.min(to, at + 4096));
    parts.push(tracker.finish());
  }
  return joinEffectiveBits(parts, format);
}

const integer24: SampleFormat = { encoding: 'integer', bitsPerSample: 24 };
const integer16: SampleFormat = { encoding: 'integer', bitsPerSample: 16 };
const float32: SampleFormat = { encoding: 'float', bitsPerSample: 32 };

describe('effective bits', () => {
  it.each([8, 12, 16, 20])('are %d where a 24-bit file carries no more', (bits) => {
    const found = effectiveBits(quantised(whiteNoiseSignal(200_000, 0.1, bits), bits), integer24);
    expect(found).toMatchObject({ zeroBits: 24 - bits, bits });
  });

  it.each([
    ['white', 0.1, integer24, 24],
    ['white', 0.001, integer24, 24],
    ['white', 0.003, integer16, 16],
    ['pink', 0.2, integer16, 16],
  ] as const)('are all of them for %s noise of rms %d', (colour, rms, format, bits) => {
    const noise = (colour === 'white' ? whiteNoiseSignal : pinkNoiseSignal)(400_000, rms, 3);
    expect(effectiveBits(quantised(noise, format.bitsPerSample), format)).toMatchObject({
      bits,
      zeroBits: 0,
    });
  });

  it.each([1.5, 2.3, 4.7])('see that samples were scaled by %d after recording', (gain) => {
    const scaled = quantised(
      quantised(whiteNoiseSignal(400_000, 0.01, 5), 16).map((x) => x * gain),
      16,
    );
    const { codesPerUsed, bits } = effectiveBits(scaled, integer16);
    expect(codesPerUsed).toBeGreaterThan(gain * 0.95);
    expect(codesPerUsed).toBeLessThan(gain * 1.05);
    expect(bits).toBeCloseTo(16 - Math.log2(gain), 0);
  });

  it('see 16 bits under a gain in a 24-bit file, even on a large offset', () => {
    const scaled = quantised(
      quantised(whiteNoiseSignal(400_000, 0.002, 6), 16).map((x) => 1.7 * x + 0.2),
      24,
    );
    const { bits, zeroBits } = effectiveBits(scaled, integer24);
    expect(zeroBits).toBe(0);
    expect(bits).toBeGreaterThan(14.8);
    expect(bits).toBeLessThan(15.7);
  });

  it('tell the bits of integers stored as floats, and nothing of true floats', () => {
    expect(effectiveBits(quantised(whiteNoiseSignal(100_000, 0.1, 7), 16), float32).bits).toBe(16);
    expect(effectiveBits(whiteNoiseSignal(100_000, 0.1, 8), float32)).toMatchObject({ bits: null });
  });

  it('tell nothing of digital silence, and take no very quiet signal for one with gaps', () => {
    expect(effectiveBits(new Float32Array(100_000), integer16).bits).toBeNull();
    expect(effectiveBits(quantised(whiteNoiseSignal(100_000, 4e-5, 9), 16), integer16).bits).toBe(16);
  });

  it('are those of the finest part: padding in one part does not hide the bits of another', () => {
    const both = new Float32Array(200_000);
    both.set(quantised(whiteNoiseSignal(100_000, 0.1, 10), 16));
    both.set(quantised(whiteNoiseSignal(100_000, 0.1, 11), 24), 100_000);
    expect(effectiveBits(both, integer24, 100_000)).toMatchObject({ zeroBits: 0, bits: 24 });
  });

  it('never claim fewer than a random quantisation has', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 6, max: 24 }),
        fc.double({ min: 1e-4, max: 0.3, noNaN: true }),
        fc.integer({ min: 1, max: 1e6 }),
        (bits, rms, seed) => {
          const found = effectiveBits(quantised(whiteNoiseSignal(20_000, rms, seed), bits), integer24);
          if (found.bits !== null) expect(found.bits).toBeGreaterThan(bits - 0.7);
        },
      ),
      { numRuns: 60 },
    );
  });

  it('of a loud tone in noise are all', () => {
    const tone = sine(300_000, 997, 48_000, 0.4);
    const noise = whiteNoiseSignal(300_000, 1e-4, 12);
    expect(
      effectiveBits(
        quantised(
          tone.map((x, n) => x + noise[n]!),
          16,
        ),
        integer16,
      ).bits,
    ).toBe(16);
  });
});
