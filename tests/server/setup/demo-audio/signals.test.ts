import { describe, expect, it } from 'vitest';
import { lowPassed } from '../../../../server/setup/demo-audio/low-pass.ts';
import { seededGaussian, seededRandom } from '../../../../shared/lib/seeded-random.ts';
import {
  dampedSines,
  humSignal,
  pinkNoiseSignal,
  sine,
  whiteNoiseSignal,
} from '../../../support/wav/signals.ts';

function rms(samples: Float32Array): number {
  return Math.sqrt(samples.reduce((sum, x) => sum + x * x, 0) / samples.length);
}

/** Power of the difference of sums over m samples: halves the band with each doubling of m. */
function octavePower(samples: Float32Array, m: number): number {
  let total = 0;
  let count = 0;
  for (let at = 0; at + 2 * m <= samples.length; at += 2 * m) {
    let difference = 0;
    for (let i = 0; i < m; i++) difference += samples[at + i]! - samples[at + m + i]!;
    total += (difference / m) ** 2;
    count++;
  }
  return total / count;
}

describe('seeded numbers', () => {
  it('a seed gives the same numbers again, another seed others', () => {
    const draw = (seed: number): number[] => Array.from({ length: 5 }, seededRandom(seed));
    expect(draw(1)).toEqual(draw(1));
    expect(draw(1)).not.toEqual(draw(2));
  });

  it('uniform numbers fill [0, 1) evenly', () => {
    const random = seededRandom(9);
    const bins = new Array<number>(10).fill(0);
    for (let i = 0; i < 100_000; i++) bins[Math.floor(random() * 10)]!++;
    for (const bin of bins) expect(Math.abs(bin - 10_000)).toBeLessThan(500);
  });

  it('normal numbers have mean 0, variance 1 and the tails of the normal law', () => {
    const gaussian = seededGaussian(seededRandom(10));
    const drawn = Float64Array.from({ length: 200_000 }, gaussian);
    const mean = drawn.reduce((sum, x) => sum + x, 0) / drawn.length;
    const variance = drawn.reduce((sum, x) => sum + x * x, 0) / drawn.length;
    const beyondTwo = drawn.filter((x) => Math.abs(x) > 2).length / drawn.length;
    expect(mean).toBeCloseTo(0, 1.8);
    expect(variance).toBeCloseTo(1, 1.8);
    // 2 (1 - Phi(2)) = 0.0455.
    expect(beyondTwo).toBeCloseTo(0.0455, 2.6);
  });
});

describe('signals', () => {
  it('noise has the rms asked for', () => {
    expect(rms(whiteNoiseSignal(200_000, 0.1, 1))).toBeCloseTo(0.1, 3);
    expect(rms(pinkNoiseSignal(400_000, 0.1, 1))).toBeGreaterThan(0.09);
    expect(rms(pinkNoiseSignal(400_000, 0.1, 1))).toBeLessThan(0.11);
  });

  it('pink noise has the same power in each octave, white noise half of it in each lower one', () => {
    const pink = pinkNoiseSignal(1_000_000, 0.1, 2);
    const white = whiteNoiseSignal(1_000_000, 0.1, 2);
    for (const m of [4, 8, 16, 32]) {
      expect(octavePower(pink, 2 * m) / octavePower(pink, m)).toBeGreaterThan(0.85);
      expect(octavePower(pink, 2 * m) / octavePower(pink, m)).toBeLessThan(1.15);
      expect(octavePower(white, 2 * m) / octavePower(white, m)).toBeCloseTo(0.5, 1.3);
    }
  });

  it('hum is the sum of its lines', () => {
    const lines = [
      { frequencyHz: 50, amplitude: 0.1 },
      { frequencyHz: 100, amplitude: 0.05 },
    ];
    // Whole periods: the rms of a sum of lines is the root of the summed squares over two.
    expect(rms(humSignal(48_000, lines, 48_000, 3))).toBeCloseTo(Math.sqrt((0.01 + 0.0025) / 2), 5);
  });

  it('a damped sine starts at its onset and has fallen to 1/e of its peaks after its decay time', () => {
    const burst = { onsetSample: 100, frequencyHz: 10_000, decayS: 0.001, amplitude: 1 };
    const samples = dampedSines(4000, [burst], 1_000_000);
    expect(samples.subarray(0, 101).every((x) => x === 0)).toBe(true);
    expect(samples[101]).toBeCloseTo(Math.exp(-0.001) * Math.sin(2 * Math.PI * 0.01), 6);
    // A quarter of a period after the onset, and ten periods (one decay time) later.
    expect(samples[1125]! / samples[125]!).toBeCloseTo(Math.exp(-1), 6);
  });

  it('the low-pass keeps what lies below its edge in place and takes away what lies above', () => {
    const filtered = (frequencyHz: number): Float32Array => {
      const input = sine(4000, frequencyHz, 48_000);
      let at = 0;
      const next = (count: number): Float32Array => input.slice(at, (at += count));
      const low = lowPassed(next, 16_000, 48_000);
      return Float32Array.from([...low(1000), ...low(1000)]);
    };
    const kept = filtered(12_000);
    const original = sine(2000, 12_000, 48_000);
    for (let n = 600; n < 2000; n++) expect(kept[n]).toBeCloseTo(original[n]!, 3);
    expect(rms(filtered(17_000).subarray(600))).toBeLessThan(1e-3);
  });
});
