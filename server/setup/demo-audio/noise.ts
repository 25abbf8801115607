import { seededGaussian, type Random } from '../../../shared/lib/seeded-random.ts';

/** Adds the next samples of a signal to `out`. */
export type AddNext = (out: Float32Array) => void;

/** Poles, gains of the filter below; the last is the direct path. */
const POLES = [0.99886, 0.99332, 0.969, 0.8665, 0.55, -0.7616];
const GAINS = [0.0555179, 0.0750759, 0.153852, 0.3104856, 0.5329522, -0.016898];
const DIRECT = 0.5362;
const DELAYED = 0.115926;

/** Gaussian noise with a flat spectrum up to half the sample rate and the given rms. */
export function whiteNoise(random: Random, rms: number): AddNext {
  const gaussian = seededGaussian(random);
  return (out) => {
    for (let i = 0; i < out.length; i++) out[i]! += rms * gaussian();
  };
}

/**
 * Gaussian noise that falls by 3 dB an octave (within 0.1 dB from about fs/4800 up), with the given rms.
 * Source: Paul Kellet (1999), refined pinking filter (from memory; its slope is checked by a test).
 */
export function pinkNoise(random: Random, rms: number): AddNext {
  const gaussian = seededGaussian(random);
  const gain = rms / pinkFilterRms();
  let [b0, b1, b2, b3, b4, b5, b6] = [0, 0, 0, 0, 0, 0, 0];
  return (out) => {
    for (let i = 0; i < out.length; i++) {
      const white = gaussian();
      b0 = POLES[0]! * b0 + GAINS[0]! * white;
      b1 = POLES[1]! * b1 + GAINS[1]! * white;
      b2 = POLES[2]! * b2 + GAINS[2]! * white;
      b3 = POLES[3]! * b3 + GAINS[3]! * white;
      b4 = POLES[4]! * b4 + GAINS[4]! * white;
      b5 = POLES[5]! * b5 + GAINS[5]! * white;
      out[i]! += gain * (b0 + b1 + b2 + b3 + b4 + b5 + b6 + DIRECT * white);
      b6 = DELAYED * white;
    }
  };
}

/** Rms of the filter's answer to white noise of variance 1: the root of the summed squares of its impulse response. */
function pinkFilterRms(): number {
  let sum = 0;
  for (let n = 0; n < 20_000; n++) {
    let tap = n === 0 ? DIRECT : n === 1 ? DELAYED : 0;
    for (let k = 0; k < POLES.length; k++) tap += GAINS[k]! * POLES[k]! ** n;
    sum += tap * tap;
  }
  return Math.sqrt(sum);
}
