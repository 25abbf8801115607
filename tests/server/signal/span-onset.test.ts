import { describe, expect, it } from 'vitest';
import { onsetInSpan } from '../../../server/signal/span-onset.ts';
import { seededNormal, seededUniform } from './synthetic-clicks.ts';

const sampleRateHz = 500_000;
const leadSamples = 512;
const options = { leadSamples, reachSamples: 400, sampleRateHz, lowHz: 0, minimumStepDb: 3 };

interface Scene {
  seed: number;
  onset: number;
  amplitude: number;
  humAmplitude?: number;
}

/** Noise of rms 0.01, hum of 50 Hz and its third harmonic, and a damped sine of 120 kHz that lasts 40 microseconds. */
function scene({ seed, onset, amplitude, humAmplitude = 0 }: Scene): Float32Array {
  const normal = seededNormal(seededUniform(seed));
  return Float32Array.from({ length: leadSamples + 400 }, (_, n) => {
    const hum =
      humAmplitude *
      (Math.sin(0.7 + (n * 2 * Math.PI * 50) / sampleRateHz) +
        0.4 * Math.sin((n * 2 * Math.PI * 150) / sampleRateHz));
    const t = (n - onset) / sampleRateHz;
    const click = t < 0 ? 0 : amplitude * Math.exp(-t / 40e-6) * Math.sin(2 * Math.PI * 120_000 * t + 0.6);
    return hum + click + 0.01 * normal();
  });
}

function errorsOf(scenes: readonly Scene[]): number[] {
  return scenes.map((one) => {
    const pick = onsetInSpan(scene(one), options);
    return pick ? Math.abs(pick.index - one.onset) : Infinity;
  });
}

function shareWithin(errors: readonly number[], samples: number): number {
  return errors.filter((error) => error <= samples).length / errors.length;
}

const seeds = Array.from({ length: 200 }, (_, index) => index + 1);

describe('the onset in a span that somebody drew', () => {
  it('is placed within two samples where a click is loud', () => {
    const errors = errorsOf(seeds.map((seed) => ({ seed, onset: 560 + (seed % 90), amplitude: 0.5 })));
    expect(shareWithin(errors, 2)).toBeGreaterThan(0.97);
  });

  it('is found in the lead, where the span was begun a little late', () => {
    const errors = errorsOf(seeds.map((seed) => ({ seed, onset: 500, amplitude: 0.5 })));
    expect(shareWithin(errors, 2)).toBeGreaterThan(0.97);
  });

  it('does not mind hum that is far louder than the click', () => {
    const errors = errorsOf(seeds.map((seed) => ({ seed, onset: 600, amplitude: 0.3, humAmplitude: 0.8 })));
    expect(shareWithin(errors, 3)).toBeGreaterThan(0.95);
  });

  it('says honestly how well it is known', () => {
    const picks = seeds.map((seed) => onsetInSpan(scene({ seed, onset: 600, amplitude: 0.06 }), options));
    const found = picks.filter((pick) => pick !== null);
    expect(found.length).toBeGreaterThan(150);
    const within = found.filter((pick) => Math.abs(pick.index - 600) <= 3 * pick.uncertaintySamples + 3);
    expect(within.length / found.length).toBeGreaterThan(0.8);
  });

  it('is not made up in plain noise', () => {
    const lengths = [600, 912, 3000];
    const made = lengths.flatMap((length) =>
      seeds.map((seed) => {
        const normal = seededNormal(seededUniform(9000 + seed));
        return onsetInSpan(
          Float32Array.from({ length }, () => 0.01 * normal()),
          options,
        );
      }),
    );
    expect(made.filter((pick) => pick !== null).length).toBeLessThanOrEqual(2);
  });

  it('is that of the span, where a louder sound lies before what is searched', () => {
    const samples = scene({ seed: 5, onset: 600, amplitude: 0.3 });
    for (let n = 0; n < 60; n++) samples[40 + n]! += Math.sin(n) * Math.exp(-n / 12);
    const pick = onsetInSpan(samples, { ...options, reachSamples: 200 });
    expect(Math.abs(pick!.index - 600)).toBeLessThanOrEqual(3);
  });

  it('is not there in silence, without a lead, and where samples are no numbers', () => {
    expect(onsetInSpan(new Float32Array(900), options)).toBeNull();
    expect(
      onsetInSpan(scene({ seed: 1, onset: 600, amplitude: 1 }), { ...options, leadSamples: 4 }),
    ).toBeNull();
    expect(onsetInSpan(new Float32Array(900).fill(Number.NaN), options)).toBeNull();
  });
});
