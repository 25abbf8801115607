import { addDampedSine, type DampedSine } from '../../../server/setup/demo-audio/damped-sine.ts';
import { hum, type HumLine } from '../../../server/setup/demo-audio/hum.ts';
import { pinkNoise, whiteNoise } from '../../../server/setup/demo-audio/noise.ts';
import { seededRandom } from '../../../server/setup/demo-audio/seeded-random.ts';

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
