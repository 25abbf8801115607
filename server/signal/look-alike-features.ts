import { median } from './noise-floor.ts';

/** What the detector tells of each candidate, a value for each; NaN where it tells nothing. */
export interface CandidateDescriptors {
  peakFrequencyHz: Float64Array;
  centroidHz: Float64Array;
  averageFrequencyHz: Float64Array;
  durationUs: Float64Array;
  riseTimeUs: Float64Array;
  counts: Float64Array;
  snrDb: Float64Array;
  ultrasonicShare: Float64Array;
}
export type DescriptorName = keyof CandidateDescriptors;

interface Feature {
  name: DescriptorName;
  /** Onto a scale on which equal steps look equally far apart. */
  transform: (value: number) => number;
  /** Bounds of the unit, in transformed values: what is nearer looks alike however little a recording varies, */
  leastUnit: number;
  /** and what is farther apart looks different however much it does. */
  mostUnit: number;
}

const octaves = (value: number) => Math.log2(Math.max(1, value));

/** Frequencies and times in octaves, strength in dB, the share above 20 kHz as it is. */
const features: readonly Feature[] = [
  { name: 'peakFrequencyHz', transform: octaves, leastUnit: 0.15, mostUnit: 0.35 },
  { name: 'centroidHz', transform: octaves, leastUnit: 0.1, mostUnit: 0.3 },
  { name: 'averageFrequencyHz', transform: octaves, leastUnit: 0.2, mostUnit: 0.45 },
  { name: 'durationUs', transform: octaves, leastUnit: 0.4, mostUnit: 0.8 },
  { name: 'riseTimeUs', transform: octaves, leastUnit: 0.5, mostUnit: 1 },
  { name: 'counts', transform: (value) => octaves(1 + value), leastUnit: 0.4, mostUnit: 0.8 },
  { name: 'snrDb', transform: (value) => value, leastUnit: 2, mostUnit: 5 },
  { name: 'ultrasonicShare', transform: (value) => value, leastUnit: 0.05, mostUnit: 0.15 },
];
export const descriptorNames: readonly DescriptorName[] = features.map(({ name }) => name);
export const featureCount = features.length;

/** Turns a median absolute deviation into a standard deviation, for normally distributed values. */
const madToSigma = 1.4826;
const farthestUnits = 12;

/**
 * Rows of `featureCount` numbers, one row per candidate: each descriptor on its scale, less its median, over
 * a unit, no further than 12 from 0. The unit is the robust standard deviation 1.4826 MAD, within the bounds above: in a recording
 * of several families the deviation of all says nothing about one. What is not told stands at the median. No candidates give no rows. O(n log n).
 * Source: Rousseeuw and Croux (1993), Alternatives to the median absolute deviation, eq. 1.2 (the factor).
 */
export function scaleDescriptors(descriptors: CandidateDescriptors): Float64Array {
  const count = descriptors.peakFrequencyHz.length;
  const rows = new Float64Array(count * featureCount);
  features.forEach(({ name, transform, leastUnit, mostUnit }, column) => {
    const values = descriptors[name].map((value) => (Number.isNaN(value) ? NaN : transform(value)));
    const middle = medianOfTold(values);
    const spread = madToSigma * medianOfTold(values.map((value) => Math.abs(value - middle)));
    const unit = Math.min(Math.max(spread, leastUnit), mostUnit);
    for (let place = 0; place < count; place++)
      rows[place * featureCount + column] = within((values[place]! - middle) / unit);
  });
  return rows;
}

function within(units: number): number {
  return Number.isNaN(units) ? 0 : Math.min(farthestUnits, Math.max(-farthestUnits, units));
}

/** Of the values that are numbers; 0 where there is none. */
function medianOfTold(values: Float64Array): number {
  const told = values.filter((value) => !Number.isNaN(value));
  return told.length === 0 ? 0 : median(told);
}
