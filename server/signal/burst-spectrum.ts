import Meyda from 'meyda';
import { MAXIMUM_FFT_SIZE, MINIMUM_FFT_SIZE, realFft } from './fft.ts';
import { HEARING_LINE_HZ } from './hearing-line.ts';

/** Power of a burst over its noise, line by line. */
export interface BurstSpectrum {
  readonly binHz: number;
  /** Noise subtracted, not below 0; sum of squares of the samples, shared out over the lines from 0 Hz to Nyquist. */
  readonly power: Float64Array;
  /** The noise expected in each line; zeros where none was given. */
  readonly noise: Float64Array;
  /** Independent values per hertz of bandwidth, 2 T: how much the noise of a band may stray. */
  readonly valuesPerHz: number;
}

const LONGEST_SAMPLES = 4096;
const LEAST_LINES = 256;
const TAPER_SHARE = 0.1;

/**
 * Spectrum of a burst, with the mean spectrum of the noise before it taken off.
 *
 * Both are cut to the same length, tapered by a tenth at both ends and filled up with zeros to a power of two. A burst
 * longer than 4,096 samples is judged by its beginning, where its energy lies.
 *
 * @param burst at least 2 samples.
 * @param noiseSamples samples without the burst; `null` or under 16 of them: nothing is subtracted.
 */
export function burstSpectrum(
  burst: Float32Array,
  noiseSamples: Float32Array | null,
  sampleRateHz: number,
): BurstSpectrum {
  const length = Math.min(burst.length, LONGEST_SAMPLES);
  const size = Math.min(
    MAXIMUM_FFT_SIZE,
    Math.max(MINIMUM_FFT_SIZE, 2 * LEAST_LINES, 2 ** Math.ceil(Math.log2(length))),
  );
  const whole = linePower(burst.subarray(0, length), size);
  const noise =
    noiseSamples && noiseSamples.length >= 16
      ? meanNoise(noiseSamples, length, size)
      : new Float64Array(size / 2 + 1);
  const power = new Float64Array(whole.length);
  for (let bin = 0; bin < power.length; bin++) power[bin] = Math.max(0, whole[bin]! - noise[bin]!);
  return { binHz: sampleRateHz / size, power, noise, valuesPerHz: (2 * length) / sampleRateHz };
}

/** Frequency of the largest line between two limits, between lines by a parabola through the levels; `null` for none. */
export function peakFrequencyHz(spectrum: BurstSpectrum, lowHz: number, highHz: number): number | null {
  const { power, binHz } = spectrum;
  let peak = -1;
  for (let bin = Math.max(1, Math.ceil(lowHz / binHz)); bin < power.length && bin * binHz <= highHz; bin++) {
    if ((power[bin] ?? 0) > (power[peak] ?? 0)) peak = bin;
  }
  if (peak < 0) return null;
  const [left, middle, right] = [peak - 1, peak, peak + 1].map((bin) => Math.log((power[bin] ?? 0) + 1e-300));
  const bend = (left ?? 0) - 2 * (middle ?? 0) + (right ?? 0);
  const offset = bend < 0 ? ((left ?? 0) - (right ?? 0)) / (2 * bend) : 0;
  return (peak + Math.max(-0.5, Math.min(0.5, offset))) * binHz;
}

/**
 * Centroid of the amplitude spectrum between two limits in hertz, by meyda's definition (which counts in bins);
 * `null` where nothing stands over the noise.
 * Source: meyda 5.6.3, extractor spectralCentroid.
 */
export function centroidHz(spectrum: BurstSpectrum, lowHz: number, highHz: number): number | null {
  const { power, binHz } = spectrum;
  const first = Math.max(0, Math.ceil(lowHz / binHz));
  const end = Math.min(power.length, Math.floor(highHz / binHz) + 1);
  if (end <= first) return null;
  const ampSpectrum = new Float32Array(end - first);
  for (let bin = first; bin < end; bin++) ampSpectrum[bin - first] = Math.sqrt(power[bin]!);
  const bins = Meyda.featureExtractors.spectralCentroid({ ampSpectrum });
  return Number.isFinite(bins) ? (first + bins) * binHz : null;
}

/**
 * Energy over the noise below and above the hearing line, summed over the half octaves that stand clear of the noise.
 *
 * A half octave counts where its excess is more than three standard deviations of its noise, sqrt(2 / n) of the mean for
 * n independent values; else chance in the many wide bands of ultrasound would move the share.
 *
 * @returns `null` where no half octave between the limits stands clear.
 */
export function energyAboutHearingLine(
  spectrum: BurstSpectrum,
  lowHz: number,
  highHz: number,
): { below: number; above: number } | null {
  const { power, noise, binHz, valuesPerHz } = spectrum;
  const end = Math.min(power.length, Math.floor(highHz / binHz) + 1);
  let below = 0;
  let above = 0;
  for (let bin = Math.max(1, Math.ceil(lowHz / binHz)); bin < end;) {
    const half = Math.floor(2 * Math.log2((bin * binHz) / HEARING_LINE_HZ) + 1e-9);
    const next = Math.min(
      end,
      Math.max(bin + 1, Math.ceil((HEARING_LINE_HZ * 2 ** ((half + 1) / 2)) / binHz - 1e-9)),
    );
    let burst = 0;
    let noiseSum = 0;
    const values = Math.max(1, (next - bin) * binHz * valuesPerHz);
    for (; bin < next; bin++) {
      burst += power[bin]!;
      noiseSum += noise[bin]!;
    }
    if (!(burst > 3 * Math.sqrt(2 / values) * noiseSum)) continue;
    if (half >= 0) above += burst;
    else below += burst;
  }
  return below + above > 0 ? { below, above } : null;
}

/** Squares of the transform, doubled between 0 Hz and Nyquist and divided by N: their sum is that of the squares. */
function linePower(samples: Float32Array, size: number): Float64Array {
  const fft = realFft(size);
  const input = fft.input;
  const count = samples.length;
  let sum = 0;
  for (let n = 0; n < count; n++) sum += samples[n]!;
  const mean = sum / count;
  for (let n = 0; n < count; n++) input[n] = samples[n]! - mean;
  input.fill(0, count);
  const taper = Math.max(1, Math.floor(TAPER_SHARE * count));
  for (let edge = 1; edge < taper; edge++) {
    const weight = 0.5 - 0.5 * Math.cos((Math.PI * edge) / taper);
    input[edge - 1] = weight * input[edge - 1]!;
    input[count - edge] = weight * input[count - edge]!;
  }
  fft.transform();
  const output = fft.output;
  const power = new Float64Array(size / 2 + 1);
  power[0] = output[0]! ** 2 / size;
  power[size / 2] = output[1]! ** 2 / size;
  for (let bin = 1; bin < size / 2; bin++) {
    const re = output[2 * bin]!;
    const im = output[2 * bin + 1]!;
    power[bin] = (2 * (re * re + im * im)) / size;
  }
  return power;
}

/** Mean line power of noise over pieces of one length; of shorter noise scaled up to the length. */
function meanNoise(noise: Float32Array, length: number, size: number): Float64Array {
  const piece = Math.min(length, noise.length);
  const pieces = Math.min(8, Math.floor(noise.length / piece));
  const mean = new Float64Array(size / 2 + 1);
  for (let k = 0; k < pieces; k++) {
    const end = noise.length - k * piece;
    const power = linePower(noise.subarray(end - piece, end), size);
    const scale = length / piece / pieces;
    for (let bin = 0; bin < mean.length; bin++) mean[bin] = mean[bin]! + scale * power[bin]!;
  }
  return mean;
}
