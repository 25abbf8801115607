import { describe, expect, it } from 'vitest';
import type { Fingerprint } from '../../../server/signal/fingerprint.ts';
import { matchWords, searchedKeys, storedKeys } from '../../../server/signal/fingerprint-match.ts';
import { planResampling, resample } from '../../../server/signal/resample.ts';
import { addDampedSine } from '../../../server/setup/demo-audio/damped-sine.ts';
import { between, seededRandom } from '../../../shared/lib/seeded-random.ts';
import { pinkNoiseSignal } from '../../support/wav/signals.ts';
import { contentOf } from './content-of.ts';

const rateHz = 48_000;

function scene(seed: number, seconds: number): Float32Array {
  const random = seededRandom(seed);
  const samples = pinkNoiseSignal(seconds * rateHz, 0.003, seed);
  for (let n = 0; n < 4 * seconds; n++) {
    const frequencyHz = 1500 * 10 ** random();
    const decayS = between(random, [10, 60]) / frequencyHz;
    const amplitude = 0.003 * 10 ** between(random, [0, 1.3]);
    addDampedSine(
      samples,
      0,
      { onsetSample: Math.floor(random() * samples.length), frequencyHz, decayS, amplitude },
      rateHz,
    );
  }
  return samples;
}

const original = scene(1, 32);
const fingerprint = contentOf(original, rateHz).fingerprint;

/** As a service does: keys that agree suggest offsets, and the words decide. */
function findIn(stored: Fingerprint, searched: Fingerprint) {
  const steps = new Map<number, number[]>();
  for (const { key, step } of storedKeys(stored)) steps.set(key, [...(steps.get(key) ?? []), step]);
  const offsets = searchedKeys(searched).flatMap(({ key, step }) =>
    (steps.get(key) ?? []).map((storedStep) => storedStep - step),
  );
  return matchWords(searched.words, stored.words, offsets);
}

function rounded(samples: Float32Array, gain: number, bits: number): Float32Array {
  const scale = 2 ** (bits - 1);
  return samples.map((x) => Math.round(x * gain * scale) / scale);
}

function atRate(samples: Float32Array, newRateHz: number): Float32Array {
  const plan = planResampling(rateHz / newRateHz);
  const output = new Float32Array(Math.floor((samples.length * newRateHz) / rateHz));
  resample(plan, { input: samples, inputStart: 0, outputStart: 0, output });
  return output;
}

describe('the fingerprint of a recording', () => {
  it('finds the recording itself', () => {
    expect(findIn(fingerprint, fingerprint)).toMatchObject({ offset: 0, bitErrorShare: 0 });
  });

  it('finds copies that are quieter and rounded to fewer bits', () => {
    const found = findIn(fingerprint, contentOf(rounded(original, 0.5, 16), rateHz).fingerprint);
    expect(found).toMatchObject({ offset: 0 });
    expect(found!.bitErrorShare).toBeLessThan(0.2);
  });

  it.each([32_000, 44_100])('finds a copy at %d Hz', (newRateHz) => {
    const found = findIn(fingerprint, contentOf(atRate(original, newRateHz), newRateHz).fingerprint);
    expect(found).toMatchObject({ offset: 0 });
    expect(found!.bitErrorShare).toBeLessThan(0.25);
  });

  it('finds a copy with both ends cut, at any part of a step, and where it lies', () => {
    const cut = original.subarray(Math.round(6.04 * rateHz), Math.round(30 * rateHz));
    const found = findIn(fingerprint, contentOf(cut, rateHz).fingerprint);
    expect(Math.abs(found!.offset - 60.4)).toBeLessThanOrEqual(1.5);
    expect(found!.bitErrorShare).toBeLessThan(0.25);
  });

  it('finds a copy with noise 10 dB under its background', () => {
    const noise = scene(9, 32);
    const found = findIn(
      fingerprint,
      contentOf(
        original.map((x, n) => x + 0.3 * noise[n]!),
        rateHz,
      ).fingerprint,
    );
    expect(found).not.toBeNull();
  });

  it('is found again when the recording is measured in segments', () => {
    const segment = 2 ** 20;
    expect(findIn(fingerprint, contentOf(original, rateHz, { segment }).fingerprint)).toMatchObject({
      offset: 0,
    });
  });

  it('does not find other recordings of the same kind, nor silence', () => {
    for (const seed of [2, 3, 4]) {
      const other = contentOf(scene(seed, 32), rateHz).fingerprint;
      expect(findIn(fingerprint, other)).toBeNull();
      const everyOffset = Array.from({ length: 300 }, (_, k) => k - 150);
      expect(matchWords(other.words, fingerprint.words, everyOffset)).toBeNull();
    }
    const silence = contentOf(new Float32Array(32 * rateHz), rateHz).fingerprint;
    expect(searchedKeys(silence)).toEqual([]);
    expect(matchWords(silence.words, silence.words, [0])).toBeNull();
  });

  it('has no words in a recording that is too short or too slow for them', () => {
    expect(
      contentOf(original.subarray(0, rateHz), rateHz).fingerprint.words.every((word) => word === 0),
    ).toBe(true);
    expect(searchedKeys(contentOf(original, 2000).fingerprint)).toEqual([]);
    expect(contentOf(new Float32Array(3), 1).fingerprint.words).toHaveLength(30);
  });
});
