import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  hearingClassOf,
  measureBurst,
  measureSpan,
  type BurstContext,
} from '../../../server/signal/bursts.ts';
import { addClick, seededNormal, seededUniform } from './synthetic-clicks.ts';

const RATE = 20_000_000;
const context: BurstContext = {
  sampleRateHz: RATE,
  firstSample: 0,
  thresholdFs: 0.1,
  noise: null,
  fullScaleV: 1,
  preampGainDb: 40,
  observableLowHz: 0,
  observableHighHz: 9_000_000,
};

/** A = 1 V, f = 150 kHz, tau = 100 us, from sample `onset` on. */
function decayingSine(onset = 0, count = 10_000): Float32Array {
  const samples = new Float32Array(count);
  addClick(samples, { onset, frequencyHz: 150_000, decayS: 1e-4, amplitude: 1 }, RATE);
  return samples;
}

describe('parameters of a decaying sine', () => {
  // Closed form of A exp(-t/tau) sin(2 pi f t) over a threshold of 0.1 V, computed outside the project.
  // Counts: law of Harris, Tetelman and Darwish 1971 (from memory) gives 34.5, the exact count is 35.
  const burst = measureBurst(decayingSine(), context);

  it('has 35 counts', () => {
    expect(burst.counts).toBe(35);
  });

  it('has the rise time and the duration of the closed form within 0.1 microsecond', () => {
    expect(Math.abs(burst.riseTimeUs - 1.54902)).toBeLessThan(0.1);
    expect(Math.abs(burst.durationUs - 228.4236)).toBeLessThan(0.1);
  });

  it('has the peak, its level at the sensor and the energy of the closed form', () => {
    expect(burst.peakDb).toBeCloseTo(20 * Math.log10(0.983527), 2);
    // 0.983527 V behind 40 dB is 20 log10(0.983527 / 1e-6) - 40.
    expect(burst.peakDbAe).toBeCloseTo(79.856, 2);
    expect(burst.energyV2S).toBeCloseTo(2.4739e-5, 8);
  });

  it('has the average frequency and the RA value of the closed form', () => {
    expect(Math.abs((burst.averageFrequencyHz ?? 0) / 153_224 - 1)).toBeLessThan(0.001);
    expect(Math.abs((burst.raMsPerV ?? 0) / 1.57496e-3 - 1)).toBeLessThan(0.06);
  });

  it('has its peak frequency and no noise to speak of', () => {
    expect(Math.abs((burst.peakFrequencyHz ?? 0) - 150_000)).toBeLessThan(1000);
    expect(burst.snrDb).toBeNull();
    expect(burst.hearingClass).toBe('above');
  });

  it('has no volts where full scale is unknown', () => {
    const unknown = measureBurst(decayingSine(), { ...context, fullScaleV: null });
    expect([unknown.peakDbAe, unknown.energyV2S, unknown.raMsPerV]).toEqual([null, null, null]);
  });
});

describe('invariants of burst parameters', () => {
  it('scaling signal and threshold leaves counts and times, and squares the energy', () => {
    fc.assert(
      fc.property(fc.integer({ min: -8, max: 3 }), (power) => {
        const scale = 2 ** power;
        const plain = measureBurst(decayingSine(), { ...context, clippedFromFs: 100 });
        const scaled = measureBurst(
          decayingSine().map((value) => value * scale),
          { ...context, thresholdFs: 0.1 * scale, clippedFromFs: 100 },
        );
        expect(scaled.counts).toBe(plain.counts);
        expect(scaled.riseTimeUs).toBe(plain.riseTimeUs);
        expect(scaled.durationUs).toBe(plain.durationUs);
        expect(scaled.energyFs2S / plain.energyFs2S / scale ** 2).toBeCloseTo(1, 9);
      }),
      { numRuns: 20 },
    );
  });

  it('a delay moves the places and nothing else', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 3000 }),
        fc.integer({ min: 0, max: 1e9 }),
        (delay, firstSample) => {
          const plain = measureBurst(decayingSine(0, 12_000), context);
          const later = measureBurst(decayingSine(delay, 12_000), { ...context, firstSample });
          const shift = delay + firstSample;
          expect(later).toEqual({
            ...plain,
            onsetSample: plain.onsetSample + shift,
            endSample: plain.endSample + shift,
            peakSample: plain.peakSample + shift,
          });
        },
      ),
      { numRuns: 20 },
    );
  });
});

describe('spans and classes', () => {
  it('a marked span keeps its begin and end', () => {
    const span = measureSpan(decayingSine(100), {
      ...context,
      firstSample: 5000,
      startSample: 5050,
      endSample: 10_500,
    });
    expect([span.onsetSample, span.endSample]).toEqual([5050, 10_500]);
    expect(span.counts).toBe(35);
  });

  it('a span in silence has no level and no frequency', () => {
    const span = measureSpan(new Float32Array(500), { ...context, startSample: 10, endSample: 400 });
    expect(span).toMatchObject({
      peakDb: null,
      rmsDb: null,
      centroidHz: null,
      counts: 0,
      hearingClass: 'unknown',
    });
  });

  it('a burst at full scale is clipped', () => {
    const loud = decayingSine().map((value) => Math.max(-1, Math.min(1, 2 * value)));
    expect(measureBurst(loud, context).clipped).toBe(true);
    expect(measureBurst(decayingSine(), context).clipped).toBe(false);
  });

  it('energy on both sides of 20 kHz makes the class across, in the measure of what was put in', () => {
    const rate = 192_000;
    const normal = seededNormal(seededUniform(5));
    const samples = Float32Array.from({ length: 4000 }, () => 0.001 * normal());
    addClick(samples, { onset: 2000, frequencyHz: 8000, decayS: 0.001, amplitude: 0.5 }, rate);
    addClick(samples, { onset: 2000, frequencyHz: 50_000, decayS: 0.001, amplitude: 0.5 }, rate);
    const burst = measureBurst(samples, {
      ...context,
      sampleRateHz: rate,
      thresholdFs: 0.01,
      onsetSample: 2000,
      noise: { samples: samples.slice(0, 1900) },
      observableHighHz: 0.45 * rate,
    });
    expect(burst.hearingClass).toBe('across');
    expect(burst.ultrasonicShare).toBeGreaterThan(0.45);
    expect(burst.ultrasonicShare).toBeLessThan(0.55);
  });

  it('nothing is said of what cannot be seen', () => {
    const burst = measureBurst(decayingSine(), { ...context, observableHighHz: 25_000 });
    expect([burst.ultrasonicShare, burst.hearingClass]).toEqual([null, 'unknown']);
  });

  it('nor of bursts of a sensor that sees nothing below the hearing line', () => {
    const seenFrom = (observableLowHz: number) =>
      measureBurst(decayingSine(), { ...context, observableLowHz }).hearingClass;
    expect([0, 15_800, 16_000, 50_000].map(seenFrom)).toEqual(['above', 'above', 'unknown', 'unknown']);
  });

  it('the classes part at a tenth and at nine tenths', () => {
    expect([0, 0.099, 0.1, 0.9, 0.901].map(hearingClassOf)).toEqual([
      'below',
      'below',
      'across',
      'across',
      'above',
    ]);
  });
});
