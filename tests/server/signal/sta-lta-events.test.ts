import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { staLtaEvents, StaLtaEvents, usualTrigger } from '../../../server/signal/sta-lta-events.ts';

interface Reference {
  readonly sampleRateHz: number;
  readonly checksum: number;
  readonly events: readonly (readonly [trigger: number, end: number, onset: number])[];
}

// Made by tests/reference/sta-lta-events.py with numpy (its version stands in the file), over the whole signal at once.
const reference = JSON.parse(
  readFileSync(new URL('../../reference/sta-lta-events.json', import.meta.url), 'utf8'),
) as Reference;
const trigger = usualTrigger(reference.sampleRateHz);

/** The whole numbers of the script. */
function signal(): Float32Array {
  let state = 12_345;
  const next = () => {
    state = (Math.imul(1_664_525, state) + 1_013_904_223) >>> 0;
    return state >>> 16;
  };
  const count = 4 * reference.sampleRateHz;
  const samples = Float32Array.from({ length: count }, () => (next() % 201) - 100);
  for (let burst = 0; burst < 60; burst++) {
    const onset = 5000 + burst * 12_600 + (next() % 9000);
    const peak = 1000 << (burst % 5);
    const half = 20 << (burst % 6);
    for (let n = 0; n < Math.min(14 * half, count - onset); n++) {
      samples[onset + n]! += (peak >> Math.floor(n / half)) * (Math.floor(n / 3) % 2 === 0 ? 1 : -1);
    }
  }
  for (let n = 0; n < 100; n++) samples[count - 100 + n]! += n % 2 === 0 ? 8000 : -8000;
  return samples;
}

function inPieces(samples: Float32Array, pieceSamples: number) {
  const events = new StaLtaEvents(trigger);
  const found = [];
  for (let from = 0; from < samples.length; from += pieceSamples) {
    events.push(samples.subarray(from, from + pieceSamples));
    found.push(...events.take());
  }
  return [...found, ...events.finish()];
}

describe('events by short-term over long-term mean, as a stream', () => {
  let samples: Float32Array = new Float32Array(0);
  beforeAll(() => {
    samples = signal();
  });

  it('has the signal of the reference', () => {
    expect(samples.reduce((sum, value) => sum + Math.abs(value), 0)).toBe(reference.checksum);
  });

  it('are those of numpy, each with its trigger, its end and its onset', () => {
    expect(reference.events.length).toBeGreaterThan(50);
    const found = staLtaEvents(samples, trigger).map((event) => [
      event.triggerSample,
      event.endSample,
      event.onsetSample,
    ]);
    expect(found).toEqual(reference.events);
  });

  it('do not depend on how the stream is cut', () => {
    const whole = staLtaEvents(samples, trigger);
    fc.assert(
      fc.property(fc.integer({ min: 500, max: 400_000 }), (pieceSamples) => {
        expect(inPieces(samples, pieceSamples)).toEqual(whole);
      }),
      { numRuns: 8 },
    );
  });

  it('keep the onset of an event that is over before the samples after its trigger have come', () => {
    const { pickAfterSamples } = trigger;
    const short = reference.events.filter(([on, end]) => end - on < pickAfterSamples);
    expect(short.length).toBeGreaterThan(3);
  });

  it('end with the stream where they are not over', () => {
    expect(staLtaEvents(samples, trigger).at(-1)?.endSample).toBe(samples.length);
  });

  it('are none in silence, and none before the long window is full', () => {
    expect(staLtaEvents(new Float32Array(100_000), trigger)).toEqual([]);
    expect(staLtaEvents(samples.subarray(0, trigger.longSamples - 1), trigger)).toEqual([]);
  });

  it('refuse windows of which the short one is not shorter', () => {
    expect(() => new StaLtaEvents({ ...trigger, shortSamples: trigger.longSamples })).toThrow(RangeError);
  });
});
