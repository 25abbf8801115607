/** Points in the order of time; both columns have the same length. */
export interface TimeSeries {
  timesS: Float64Array;
  values: Float64Array;
}

/** A way up from a low to the next high, by index. */
export interface Leg {
  /** Where the way down to the low began. */
  from: number;
  low: number;
  high: number;
}

const MEDIAN_TO_SIGMA = 0.674_49;
const SECOND_DIFFERENCE = Math.sqrt(6);

/**
 * Means of groups of neighbouring points, at most `most` of them; a group has the mean of its times. Few points stay as they are.
 * Cost: one pass. NaN in a group makes its mean NaN.
 */
export function groupMeans({ timesS, values }: TimeSeries, most: number): TimeSeries {
  const size = Math.ceil(timesS.length / most);
  if (size <= 1) return { timesS, values };
  const count = Math.ceil(timesS.length / size);
  const grouped = { timesS: new Float64Array(count), values: new Float64Array(count) };
  for (let n = 0; n < count; n++) {
    const end = Math.min(timesS.length, (n + 1) * size);
    let [time, value] = [0, 0];
    for (let m = n * size; m < end; m++) {
      time += timesS[m]!;
      value += values[m]!;
    }
    grouped.timesS[n] = time / (end - n * size);
    grouped.values[n] = value / (end - n * size);
  }
  return grouped;
}

/**
 * Standard deviation of white noise on a slowly changing curve: median of the absolute second differences over 0.67449 and the
 * root of 6; where most of them are 0 (rounded readings) the smallest step over the root of 12. 0 for fewer than 5 values.
 * Source: common practice (median absolute deviation, rounding error).
 */
export function noiseOf(values: Float64Array): number {
  if (values.length < 5) return 0;
  const differences = new Float64Array(values.length - 2);
  for (let n = 0; n < differences.length; n++)
    differences[n] = Math.abs(values[n]! - 2 * values[n + 1]! + values[n + 2]!);
  differences.sort();
  const sigma = differences[differences.length >> 1]! / MEDIAN_TO_SIGMA / SECOND_DIFFERENCE;
  if (sigma > 0) return sigma;
  const smallest = differences.find((difference) => difference > 0) ?? 0;
  return smallest / Math.sqrt(12);
}

/** Median of each value and its two neighbours on both sides; the two at each end stay. Spikes of up to two values vanish. */
export function medianOfFive(values: Float64Array): Float64Array {
  const smooth = Float64Array.from(values);
  const five = new Float64Array(5);
  for (let n = 2; n < values.length - 2; n++) {
    for (let m = 0; m < 5; m++) five[m] = values[n - 2 + m]!;
    smooth[n] = five.sort()[2]!;
  }
  return smooth;
}

/**
 * Ways up by more than `least`, each from its low to its high; a turn counts once the curve has come back by `least`.
 * Empty where the values stay within `least`. Cost: one pass.
 */
export function upwardLegs(values: Float64Array, least: number): Leg[] {
  const legs: Leg[] = [];
  let way: 'unknown' | 'up' | 'down' = 'unknown';
  let [from, low, high] = [0, 0, 0];
  for (let n = 1; n < values.length; n++) {
    const value = values[n]!;
    if (way !== 'up' && value < values[low]!) low = n;
    if (way !== 'down' && value > values[high]!) high = n;
    if (way !== 'up' && value - values[low]! >= least) {
      if (way === 'unknown') from = highestBefore(values, low);
      [way, high] = ['up', n];
    } else if (way !== 'down' && values[high]! - value >= least) {
      if (way === 'up') legs.push({ from, low, high });
      [way, from, low] = ['down', high, n];
    }
  }
  if (way === 'up') legs.push({ from, low, high });
  return legs;
}

function highestBefore(values: Float64Array, end: number): number {
  let highest = 0;
  for (let n = 1; n <= end; n++) if (values[n]! > values[highest]!) highest = n;
  return highest;
}
