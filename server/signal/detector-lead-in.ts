import { filterInPlace } from './biquad.ts';
import { bandSections } from './onset-search.ts';

/** An octave that is watched, and the power of its noise. */
export interface LeadInBand {
  readonly lowHz: number;
  readonly highHz: number;
  readonly noisePower: number;
}

/** Periods of a band's lower edge: before the first sample for its filter to settle, and behind it, where it must be quiet. */
const SETTLING_PERIODS = 12;
const QUIET_PERIODS = 4;
const LEAST_SAMPLES = 16;

/**
 * Samples that lead smoothly into the first ones of a recording, so that filters have settled there: the first samples turned
 * about a centre, x[-n] = 2 c - x[n], and faded in.
 *
 * A hum goes on through the turn as if it had been there before; what is left of noise is a step of twice the difference between the centre
 * and what lies below the bands. So the centre is the one that leaves least energy right behind the first sample, over all bands
 * in multiples of their noise: with a the lead-in about 0 and b that of a constant 1, c = - sum <a, b> / 2 sum <b, b> behind the filters.
 *
 * @param head the first samples; all zeros come out where there is none.
 * @param count samples wanted.
 * @param bands none: turned about the first sample.
 */
export function leadInTo(
  head: Float32Array,
  count: number,
  bands: readonly LeadInBand[],
  sampleRateHz: number,
): Float32Array {
  const centre = head.length < LEAST_SAMPLES ? (head[0] ?? 0) : quietestCentre(head, bands, sampleRateHz);
  return Float32Array.from(turned(head, count, centre));
}

/** The last one comes right before the head; the first half fades in. */
function turned(head: Float32Array, count: number, centre: number): Float64Array {
  const fade = count / 2;
  return Float64Array.from({ length: count }, (_, n) => {
    const back = Math.min(head.length - 1, count - n);
    const weight = n >= fade ? 1 : 0.5 - 0.5 * Math.cos((Math.PI * n) / fade);
    return weight * (2 * centre - (head[back] ?? 0));
  });
}

function quietestCentre(head: Float32Array, bands: readonly LeadInBand[], sampleRateHz: number): number {
  let product = 0;
  let square = 0;
  for (const { lowHz, highHz, noisePower } of bands) {
    if (!(noisePower > 0)) continue;
    const period = sampleRateHz / lowHz;
    const before = Math.min(head.length, Math.ceil(SETTLING_PERIODS * period));
    const after = Math.min(head.length, Math.ceil(QUIET_PERIODS * period));
    const sections = bandSections(lowHz, highHz, sampleRateHz);
    const answerTo = (lead: Float64Array, then: Float32Array): Float64Array => {
      const samples = new Float64Array(before + after);
      samples.set(lead);
      samples.set(then, before);
      filterInPlace(samples, sections);
      return samples.subarray(before);
    };
    const signal = answerTo(turned(head, before, 0), head.subarray(0, after));
    const step = answerTo(turned(new Float32Array(1), before, 0.5), new Float32Array(after));
    for (let n = 0; n < after; n++) {
      product += (signal[n]! * step[n]!) / noisePower;
      square += step[n]! ** 2 / noisePower;
    }
  }
  return square > 0 ? -product / (2 * square) : head[0]!;
}
