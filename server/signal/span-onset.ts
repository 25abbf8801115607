import { butterworth, filterInPlace } from './biquad.ts';
import { onsetCriterion, pickOnset } from './onset.ts';
import { predictionError, predictionFilter } from './prediction-error.ts';

export interface SpanOnset {
  /** Sample of the input at which the sound begins. */
  readonly index: number;
  /** Standard deviation in samples, by the weights of the criterion. */
  readonly uncertaintySamples: number;
  /** rms after over rms before, in dB, of what cannot be predicted from the lead. */
  readonly stepDb: number;
}

export interface SpanOnsetOptions {
  /** How many samples of the input stand before the span that somebody drew. */
  readonly leadSamples: number;
  /** How far before the span the onset may lie, at most the lead. */
  readonly reachSamples: number;
  readonly sampleRateHz: number;
  /** What lies below is left out; 0 for nothing. */
  readonly lowHz: number;
  /** Least rise at an onset. */
  readonly minimumStepDb: number;
}

const HIGHEST_ORDER = 16;
const LEAD_PER_ORDER = 12;
const LEAST_TAIL = 16;
const LONGEST_TAIL = 256;
const REFINING_REACH = 6;
/**
 * Twice the log-likelihood by which two variances must explain the window better than one. In white Gaussian noise it
 * is passed in about one of two thousand windows of 100 to 3000 samples (by trial).
 */
const LEAST_EVIDENCE = 32;
const SMALLEST_VARIANCE = 1e-30;

/**
 * Where the sound inside a span begins, to the sample, or `null` where nothing stands out from what was before.
 *
 * Hum and colour of the noise are taken off by the filter that predicts the lead from its own past: it is causal and its
 * first coefficient is 1, so an onset stays where it is. The window of the criterion ends shortly after the largest
 * value inside the span, and is narrowed once about the first pick.
 *
 * @param samples lead and span, any unit. An empty span or a lead of fewer than 8 samples gives `null`; NaN gives `null`.
 * Cost: about 20 operations per sample.
 * Source: R. Sleeman and T. van Eck, Robust automatic P-phase picking, Physics of the Earth and Planetary Interiors 113
 * (1999) 265 (prediction and the criterion); M. Akazawa, 13th World Conference on Earthquake Engineering (2004) 786
 * (narrowing).
 */
export function onsetInSpan(samples: Float32Array, options: SpanOnsetOptions): SpanOnset | null {
  const { leadSamples, reachSamples, minimumStepDb } = options;
  if (leadSamples < 8 || samples.length <= leadSamples) return null;
  const order = Math.min(HIGHEST_ORDER, Math.floor(leadSamples / LEAD_PER_ORDER));
  const error = unpredicted(samples, order, options);
  const peak = largestFrom(error, leadSamples - order);
  const tail = Math.min(LONGEST_TAIL, Math.max(LEAST_TAIL, (samples.length - leadSamples) >> 3));
  const begin = Math.max(0, leadSamples - order - reachSamples);
  const window = error.subarray(begin, peak + tail);
  const first = pickOnset(window, { minimumStepDb });
  if (!first || evidenceAt(window, first.index) < LEAST_EVIDENCE) return null;
  const from = Math.max(0, first.index - Math.max(32, REFINING_REACH * (peak - begin - first.index)));
  const fine = pickOnset(window.subarray(from), { minimumStepDb });
  const pick = fine ? { ...fine, index: fine.index + from } : first;
  return { ...pick, index: pick.index + begin + order };
}

function unpredicted(samples: Float32Array, order: number, options: SpanOnsetOptions): Float64Array {
  const { leadSamples, sampleRateHz, lowHz } = options;
  const values = Float64Array.from(samples);
  const mean = values.subarray(0, leadSamples).reduce((sum, value) => sum + value, 0) / leadSamples;
  for (let n = 0; n < values.length; n++) values[n]! -= mean;
  const edgeHz = Math.min(0.9 * lowHz, 0.4 * sampleRateHz);
  // A filter that rings for longer than the lead would only bring its own beginning.
  if (edgeHz * leadSamples > 4 * sampleRateHz)
    filterInPlace(values, butterworth('highpass', 2, edgeHz, sampleRateHz));
  return predictionError(values, predictionFilter(values.slice(0, leadSamples), order));
}

function largestFrom(values: Float64Array, from: number): number {
  let place = Math.max(0, from);
  for (let n = place; n < values.length; n++) if (Math.abs(values[n]!) > Math.abs(values[place]!)) place = n;
  return place;
}

/** Twice the log-likelihood of two variances, parted at `index`, over that of one. */
function evidenceAt(window: Float64Array, index: number): number {
  let sum = 0;
  let squares = 0;
  for (const value of window) {
    sum += value;
    squares += value * value;
  }
  const mean = sum / window.length;
  const variance = Math.max(SMALLEST_VARIANCE, squares / window.length - mean * mean);
  return (window.length - 1) * Math.log(variance) - (onsetCriterion(window)[index] ?? Infinity);
}
