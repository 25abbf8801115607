import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createLimiter, LIMITER_CEILING } from '@/composables/bench/sound/limiter.ts';

const rateHz = 48_000;

function limited(channels: readonly Float32Array[], blockSamples = 128): Float32Array[] {
  const limiter = createLimiter(rateHz, channels.length);
  const length = channels[0]?.length ?? 0;
  const outputs = channels.map(() => new Float32Array(length));
  for (let at = 0; at < length; at += blockSamples) {
    const cut = (samples: Float32Array) => samples.subarray(at, at + blockSamples);
    limiter.process(channels.map(cut), outputs.map(cut));
  }
  return outputs;
}

/** NaN where one is among them. */
function loudest(outputs: readonly Float32Array[]): number {
  return Math.max(...outputs.map((output) => output.reduce((most, x) => Math.max(most, Math.abs(x)), 0)));
}

const square = (period: number, amplitude: number, length = 4000) =>
  Float32Array.from({ length }, (_, n) => (Math.floor(n / period) % 2 === 0 ? amplitude : -amplitude));

const hostileSample = fc.oneof(
  fc.float(),
  fc.float({ min: -2, max: 2, noNaN: true }),
  fc.constantFrom(
    Number.NaN,
    Number.POSITIVE_INFINITY,
    Number.NEGATIVE_INFINITY,
    3.4e38,
    -3.4e38,
    1e-45,
    0,
    -0,
    1,
    -1,
    LIMITER_CEILING,
  ),
);

describe('the limiter', () => {
  it('lets nothing past its ceiling of -6 dB, whatever comes', () => {
    expect(20 * Math.log10(LIMITER_CEILING)).toBeLessThanOrEqual(-6);
    fc.assert(
      fc.property(
        fc.array(fc.tuple(hostileSample, fc.integer({ min: 1, max: 400 })), { minLength: 1, maxLength: 40 }),
        fc.array(hostileSample, { minLength: 1, maxLength: 600 }),
        fc.integer({ min: 1, max: 700 }),
        (steps, noise, blockSamples) => {
          const left = Float32Array.from(steps.flatMap(([x, length]) => new Array<number>(length).fill(x)));
          const right = left.map((_, n) => noise[n % noise.length]!);
          expect(loudest(limited([left, right], blockSamples))).toBeLessThanOrEqual(LIMITER_CEILING);
        },
      ),
      { numRuns: 300 },
    );
  });

  it.each([
    ['full-scale squares', [square(1, 1), square(24, 1)]],
    ['squares far over full scale', [square(7, 1e6), square(480, 40)]],
    ['a sudden step', [Float32Array.from({ length: 4000 }, (_, n) => (n < 2000 ? 0.001 : 1))]],
    ['a single sample', [Float32Array.from({ length: 4000 }, (_, n) => (n === 1000 ? -1 : 0))]],
    ['nothing but what is no number', [new Float32Array(4000).fill(Number.NaN)]],
    ['infinities', [new Float32Array(4000).fill(Number.NEGATIVE_INFINITY)]],
  ])('%s stay below it', (_name, channels) => {
    expect(loudest(limited(channels))).toBeLessThanOrEqual(LIMITER_CEILING);
  });

  it('gets there by its gain: a loud tone stays a tone and is not cut', () => {
    const tone = Float32Array.from({ length: 9600 }, (_, n) => Math.sin((2 * Math.PI * 1000 * n) / rateHz));
    const [output = new Float32Array(0)] = limited([tone]);
    const delay = createLimiter(rateHz, 1).delaySamples;
    for (let n = 4800; n < 9600; n++)
      expect(Math.abs(output[n]! - LIMITER_CEILING * tone[n - delay]!)).toBeLessThan(0.01);
  });

  it('leaves what is below the ceiling as it is, only later', () => {
    const soft = square(31, 0.4);
    const [output = new Float32Array(0)] = limited([soft]);
    const delay = createLimiter(rateHz, 1).delaySamples;
    expect(output.subarray(delay)).toEqual(soft.subarray(0, soft.length - delay));
  });

  it('is the same for all channels, so that a place in the room stays where it is', () => {
    const [a = new Float32Array(0), b = new Float32Array(0)] = limited([square(10, 1), square(10, 0.25)]);
    for (let n = 200; n < 4000; n++) expect(b[n]! / a[n]!).toBeCloseTo(0.25, 5);
  });

  it('lets go again after a click', () => {
    const samples = new Float32Array(48_000).fill(0.1);
    samples[1000] = 1;
    const [output = new Float32Array(0)] = limited([samples]);
    expect(output[1100]).toBeLessThan(0.07);
    expect(output[47_000]).toBeCloseTo(0.1, 3);
  });

  it('goes on when an input ends, and forgets what is not a number', () => {
    const limiter = createLimiter(rateHz, 2);
    const outputs = () => [new Float32Array(512), new Float32Array(512)];
    limiter.process([new Float32Array(512).fill(Number.NaN)], outputs());
    const silent = outputs();
    limiter.process([], silent);
    expect(loudest(silent)).toBe(0);
    const later = outputs();
    limiter.process([new Float32Array(512).fill(0.3), new Float32Array(512).fill(0.3)], later);
    expect(later[0]?.[511]).toBeCloseTo(0.3, 5);
  });
});
