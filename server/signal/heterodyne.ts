import { kaiser } from './kaiser.ts';

export interface ComplexSamples {
  re: Float32Array;
  im: Float32Array;
}

/**
 * Moves a signal down in frequency: z[n] = x[n] exp(-2 pi i c n), so that the carrier c comes to stand at 0.
 *
 * What lay above the carrier lies at positive frequencies then and what lay below it at negative ones; the mirror image of a real signal
 * comes along and is left to the low-pass that has to follow (`bandAboveCarrier`).
 *
 * @param input x, full scale 1; NaN stays where it is
 * @param firstSample number of the sample that `input[0]` is: blocks join without a seam; may be negative
 * @param carrierCycles c in cycles per sample, from 0 to 0.5
 * @returns real and imaginary part, as long as the input; empty for an empty one
 * Cost: one sine and one cosine a sample.
 * Source: the frequency shift of the Fourier transform, as in A. V. Oppenheim and R. W. Schafer, "Discrete-Time Signal Processing".
 */
export function mixDown(input: Float32Array, firstSample: number, carrierCycles: number): ComplexSamples {
  const re = new Float32Array(input.length);
  const im = new Float32Array(input.length);
  for (let n = 0; n < input.length; n++) {
    const cycles = carrierCycles * (firstSample + n);
    const angle = 2 * Math.PI * (cycles - Math.floor(cycles));
    re[n] = input[n]! * Math.cos(angle);
    im[n] = -input[n]! * Math.sin(angle);
  }
  return { re, im };
}

/**
 * How far above the carrier c a low-pass may reach after `mixDown`: from 0.5 - c on lies the mirror image of what is below it.
 *
 * @param carrierCycles cycles per sample, from 0 and below 0.5
 * @returns cycles per sample at which the stopband must have begun
 */
export function bandAboveCarrier(carrierCycles: number): number {
  return 0.5 - carrierCycles;
}

/** Half length of the filter that turns by a quarter of a cycle. */
export const SIDEBAND_REACH_SAMPLES = 255;
/** Stopband near -60 dB. */
const KAISER_BETA = 5.65;

/** Taps at 1, 3, 5, ... samples from the middle; those at even places are 0, and those before it have the other sign. */
const QUARTER_TURN = Float64Array.from({ length: (SIDEBAND_REACH_SAMPLES + 1) / 2 }, (_, i) => {
  const k = 2 * i + 1;
  return (2 / (Math.PI * k)) * kaiser(k / (SIDEBAND_REACH_SAMPLES + 1), KAISER_BETA);
});

export interface SidebandBlock {
  /** Number of the output sample that `output[0]` is, in the samples of z. */
  outputStart: number;
  output: Float32Array;
}

/**
 * The upper sideband of a complex signal as a real one: y[n] = Re z[n] - sum over k of h[k] Im z[n - k], with h the Hilbert transformer
 * 2 / (pi k) at odd k under a Kaiser window of 511 samples. Linear phase.
 *
 * A sine of amplitude A above the carrier comes out with amplitude A; what lay below the carrier is 60 dB down. Within 0.0035 of the rate
 * about 0 (170 Hz at 48 kHz), and about half the rate, both sidebands are heard.
 *
 * @param z from `mixDown` after a low-pass; samples outside of it count as 0; NaN spreads over the reach of the filter
 * @param block where to begin and what to fill. Cost: 128 multiplications a sample.
 * Source: the phasing method, R. V. L. Hartley, US patent 1,666,206 (1928); taps as in A. V. Oppenheim and R. W. Schafer,
 *   "Discrete-Time Signal Processing", on Hilbert transformers.
 */
export function upperSideband(z: ComplexSamples, { outputStart, output }: SidebandBlock): void {
  const { re, im } = z;
  for (let n = 0; n < output.length; n++) {
    const place = outputStart + n;
    let turned = 0;
    for (let i = 0; i < QUARTER_TURN.length; i++) {
      const k = 2 * i + 1;
      turned += QUARTER_TURN[i]! * ((im[place - k] ?? 0) - (im[place + k] ?? 0));
    }
    output[n] = re[place]! - turned;
  }
}
