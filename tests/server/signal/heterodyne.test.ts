import { describe, expect, test } from 'vitest';
import { bandAboveCarrier, mixDown, upperSideband } from '../../../server/signal/heterodyne.ts';
import { planResampling, resample } from '../../../server/signal/resample.ts';
import {
  CARRIER_HZ,
  LINES_PERIOD,
  LINES_RATE_HZ,
  listeningReference,
  makeLines,
} from '../../reference/listening-reference.ts';
import { sine } from '../../support/wav/signals.ts';

function shifted(input: Float32Array, carrierHz: number, fromHz: number, toHz = 48_000): Float32Array {
  const carrier = carrierHz / fromHz;
  const plan = planResampling(fromHz / toHz, bandAboveCarrier(carrier));
  const mixed = mixDown(input, 0, carrier);
  const length = Math.round(input.length / plan.inputPerOutput);
  const z = { re: new Float32Array(length), im: new Float32Array(length) };
  for (const part of ['re', 'im'] as const)
    resample(plan, { input: mixed[part], inputStart: 0, outputStart: 0, output: z[part] });
  const output = new Float32Array(length);
  upperSideband(z, { outputStart: 0, output });
  return output;
}

/** Amplitude of a tone, away from the ends. */
function amplitudeAt(samples: Float32Array, hz: number, rateHz = 48_000): number {
  const inner = samples.subarray(2000, samples.length - 2000);
  let re = 0;
  let im = 0;
  for (const [n, sample] of inner.entries()) {
    re += sample * Math.cos((2 * Math.PI * hz * n) / rateHz);
    im += sample * Math.sin((2 * Math.PI * hz * n) / rateHz);
  }
  return (2 * Math.hypot(re, im)) / inner.length;
}

describe('shifting down', () => {
  // A difference of frequencies: 42 kHz against 40 kHz stands at 2 kHz.
  test.each([
    { hz: 42_000, carrierHz: 40_000, fromHz: 192_000 },
    { hz: 42_000, carrierHz: 40_000, fromHz: 96_000 },
    { hz: 152_000, carrierHz: 150_000, fromHz: 1_000_000 },
  ])('$hz Hz against $carrierHz Hz stands at 2 kHz, as strong', ({ hz, carrierHz, fromHz }) => {
    const frames = fromHz / 4;
    const heard = shifted(sine(frames, hz, fromHz, 0.5), carrierHz, fromHz);
    expect(amplitudeAt(heard, 2000)).toBeCloseTo(0.5, 3);
    const rest = heard.subarray(2000, -2000).reduce((sum, x) => sum + x * x, 0) / (heard.length - 4000);
    expect(rest).toBeCloseTo(0.125, 3);
  });

  test('what lies below the carrier, and the mirror of what lies above, are 55 dB down', () => {
    const below = shifted(sine(48_000, 38_000, 96_000), CARRIER_HZ, 96_000);
    const inner = below.subarray(2000, -2000);
    expect(20 * Math.log10(Math.max(...inner.map(Math.abs)))).toBeLessThan(-55);
    const above = shifted(sine(48_000, 42_000, 96_000), CARRIER_HZ, 96_000);
    expect(20 * Math.log10(amplitudeAt(above, 14_000))).toBeLessThan(-80);
  });

  test('many lines on both sides come out as scipy has their upper sideband', () => {
    const period = makeLines();
    const three = new Float32Array(3 * LINES_PERIOD);
    for (const n of [0, 1, 2]) three.set(period, n * LINES_PERIOD);
    const heard = shifted(three, CARRIER_HZ, LINES_RATE_HZ);
    const middle = heard.subarray(LINES_PERIOD / 2, LINES_PERIOD);
    // 60 dB under an rms of 0.067 for each of two halves of the filter.
    for (const [i, value] of listeningReference.sideband.entries())
      expect(Math.abs(middle[16 * i]! - value)).toBeLessThan(3e-4);
  });

  test('blocks join without a seam', () => {
    const input = sine(3000, 30_000, 96_000);
    const whole = mixDown(input, -500, 0.3);
    const part = mixDown(input.subarray(1234), 734, 0.3);
    expect(part.re).toEqual(whole.re.subarray(1234));
    const heard = new Float32Array(3000);
    upperSideband(whole, { outputStart: 0, output: heard });
    const later = new Float32Array(100);
    upperSideband(whole, { outputStart: 1500, output: later });
    expect(later).toEqual(heard.subarray(1500, 1600));
  });

  test('nothing in, nothing out', () => {
    expect(mixDown(new Float32Array(0), 0, 0.1).re).toHaveLength(0);
    expect(shifted(new Float32Array(4000), 20_000, 96_000).every((x) => x === 0)).toBe(true);
  });
});
