import { addDampedSine, type DampedSine } from '../../../server/setup/demo-audio/damped-sine.ts';
import { hum, type HumLine } from '../../../server/setup/demo-audio/hum.ts';
import { pinkNoise, whiteNoise } from '../../../server/setup/demo-audio/noise.ts';
import { seededRandom } from '../../../shared/lib/seeded-random.ts';

/** Amplitude times sin(2 pi f n / fs + phase). */
export function sine(
  frames: number,
  frequencyHz: number,
  sampleRateHz: number,
  amplitude = 1,
  phase = 0,
): Float32Array {
  return Float32Array.from(
    { length: frames },
    (_, n) => amplitude * Math.sin((2 * Math.PI * frequencyHz * n) / sampleRateHz + phase),
  );
}

/** Silence with damped sines in it. */
export function dampedSines(frames: number, bursts: DampedSine[], sampleRateHz: number): Float32Array {
  const out = new Float32Array(frames);
  for (const burst of bursts) addDampedSine(out, 0, burst, sampleRateHz);
  return out;
}

export function pinkNoiseSignal(frames: number, rms: number, seed: number): Float32Array {
  const out = new Float32Array(frames);
  pinkNoise(seededRandom(seed), rms)(out);
  return out;
}

export function whiteNoiseSignal(frames: number, rms: number, seed: number): Float32Array {
  const out = new Float32Array(frames);
  whiteNoise(seededRandom(seed), rms)(out);
  return out;
}

export function humSignal(
  frames: number,
  lines: HumLine[],
  sampleRateHz: number,
  seed: number,
): Float32Array {
  const out = new Float32Array(frames);
  hum(lines, sampleRateHz, seededRandom(seed))(out);
  return out;
}

/** The sum of signals of one length. */
export function mix(...signals: Float32Array[]): Float32Array {
  return Float32Array.from({ length: signals[0]?.length ?? 0 }, (_, n) =>
    signals.reduce((sum, signal) => sum + signal[n]!, 0),
  );
}

/** Windowed-sinc low-pass (Blackman): a steep filter as a codec or a resampler has it. */
export function lowPass(samples: Float32Array, cutoffHz: number, sampleRateHz: number): Float32Array {
  const half = 200;
  const taps = Float64Array.from({ length: 2 * half + 1 }, (_, i) => {
    const t = i - half;
    const f = (2 * cutoffHz) / sampleRateHz;
    const ideal = t === 0 ? f : Math.sin(Math.PI * f * t) / (Math.PI * t);
    const phase = (2 * Math.PI * i) / (2 * half);
    return ideal * (0.42 - 0.5 * Math.cos(phase) + 0.08 * Math.cos(2 * phase));
  });
  return samples.map((_, n) => {
    let sum = 0;
    for (let i = 0; i < taps.length; i++) sum += taps[i]! * (samples[n + half - i] ?? 0);
    return sum;
  });
}
