import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { gateFrameSize, NoiseProfiler, type NoiseProfile } from '../../../server/signal/noise-profile.ts';
import { SpectralGate } from '../../../server/signal/spectral-gate.ts';
import {
  GATE_SIZE,
  listeningReference,
  makeHumWithBurst,
  QUIET_SAMPLES,
} from '../../reference/listening-reference.ts';
import { dampedSines, humSignal, mix, whiteNoiseSignal } from '../../support/wav/signals.ts';

const rateHz = 192_000;

function profileOf(samples: Float32Array, size: number): NoiseProfile {
  const profiler = new NoiseProfiler(size);
  for (let at = 0; at + size <= samples.length; at += size / 2)
    profiler.push(samples.subarray(at, at + size));
  return profiler.finish();
}

function gated(samples: Float32Array, profile: NoiseProfile, pieceSamples = samples.length): Float32Array {
  const gate = new SpectralGate(profile);
  const parts: Float32Array[] = [];
  for (let at = 0; at < samples.length; at += pieceSamples)
    parts.push(gate.push(samples.subarray(at, at + pieceSamples)));
  parts.push(gate.finish());
  const whole = new Float32Array(parts.reduce((sum, part) => sum + part.length, 0));
  parts.reduce((at, part) => (whole.set(part, at), at + part.length), 0);
  return whole.subarray(0, samples.length);
}

const rms = (samples: Float32Array) => Math.sqrt(samples.reduce((sum, x) => sum + x * x, 0) / samples.length);
const peak = (samples: Float32Array) => samples.reduce((most, x) => Math.max(most, Math.abs(x)), 0);
const db = (ratio: number) => 20 * Math.log10(ratio);

describe('a gate that knows the noise', () => {
  const frames = 192_000;
  const hum = mix(
    humSignal(
      frames,
      [
        { frequencyHz: 100, amplitude: 0.1 },
        { frequencyHz: 9500, amplitude: 0.05 },
      ],
      rateHz,
      3,
    ),
    whiteNoiseSignal(frames, 0.003, 4),
  );
  const size = gateFrameSize(rateHz, 1);
  const profile = profileOf(hum.subarray(0, rateHz / 2), size);
  const clickAt = 120_000;
  const click = dampedSines(
    frames,
    [{ onsetSample: clickAt, frequencyHz: 45_000, amplitude: 0.5, decayS: 0.0002 }],
    rateHz,
  );

  test('lowers hum and noise by 20 dB', () => {
    const quiet = gated(hum, profile).subarray(size, frames - size);
    expect(db(rms(quiet) / rms(hum))).toBeLessThan(-19.5);
    expect(db(rms(quiet) / rms(hum))).toBeGreaterThan(-20.5);
  });

  test('leaves the peak of a click within 1 dB', () => {
    const out = gated(mix(hum, click), profile);
    const around = out.subarray(clickAt - 200, clickAt + 400);
    expect(Math.abs(db(peak(around) / peak(click)))).toBeLessThan(1);
  });

  test('does not twitter: no frame of the noise that is left stands 6 dB over the others', () => {
    const quiet = gated(hum, profile).subarray(size, frames - size);
    const levels: number[] = [];
    for (let at = 0; at + 1024 <= quiet.length; at += 1024) levels.push(rms(quiet.subarray(at, at + 1024)));
    const middle = levels.toSorted((a, b) => a - b)[levels.length >> 1]!;
    expect(db(Math.max(...levels) / middle)).toBeLessThan(6);
  });

  test('a click or two in the quiet span do not move its profile', () => {
    const quiet = hum.slice(0, rateHz / 2);
    quiet[30_000]! += 0.9;
    const moved = profileOf(quiet, size);
    const ratios = Array.from(moved.power, (power, k) => power / profile.power[k]!);
    expect(10 * Math.log10(Math.max(...ratios))).toBeLessThan(1);
  });
});

describe('a gate beside scipy', () => {
  const samples = makeHumWithBurst();
  const profile = profileOf(samples.subarray(0, QUIET_SAMPLES), GATE_SIZE);

  test('has the same profile of the noise', () => {
    for (const [i, power] of listeningReference.profile.entries())
      expect(profile.power[16 * i]! / power).toBeCloseTo(1, 3);
  });

  test('makes the same samples', () => {
    const out = gated(samples, profile);
    for (const [i, value] of listeningReference.gated.entries()) {
      const at = 48 * i;
      if (at < 3 * GATE_SIZE || at > samples.length - 3 * GATE_SIZE) continue;
      expect(Math.abs(out[at]! - value)).toBeLessThan(1e-5);
    }
    for (const [i, value] of listeningReference.gatedBurst.entries())
      expect(Math.abs(out[15_990 + i]! - value)).toBeLessThan(1e-5);
  });

  test('it matters not in which pieces the samples come', () => {
    const whole = gated(samples, profile);
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 5000 }), (pieceSamples) => {
        expect(gated(samples, profile, pieceSamples)).toEqual(whole);
      }),
      { numRuns: 10 },
    );
  });

  test('without noise to go by everything is left as it is, and silence stays silent', () => {
    const open = gated(samples, new NoiseProfiler(GATE_SIZE).finish());
    for (let n = 0; n < samples.length; n++) expect(Math.abs(open[n]! - samples[n]!)).toBeLessThan(1e-5);
    expect(peak(gated(new Float32Array(5000), profile))).toBe(0);
  });
});

describe('the frame of a gate', () => {
  test.each([
    [192_000, 1, 2048],
    [1_000_000, 1, 8192],
    [1_000_000, 10, 1024],
    [1_000_000, 100, 256],
    [8000, 50, 256],
    [20_000_000, 1, 16_384],
  ])('at %d Hz, %d times slower, it has %d samples', (sampleRateHz, slow, samples) => {
    expect(gateFrameSize(sampleRateHz, slow)).toBe(samples);
  });

  test('a frame of another length is refused', () => {
    expect(() => new NoiseProfiler(512).push(new Float32Array(511))).toThrow('not 512 samples');
  });
});
