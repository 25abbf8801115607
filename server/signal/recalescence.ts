import { measureRise, type Rise } from './recalescence-rise.ts';
import {
  groupMeans,
  medianOfFive,
  noiseOf,
  upwardLegs,
  type Leg,
  type TimeSeries,
} from './temperature-legs.ts';

export interface Recalescence {
  onsetS: number;
  /** One standard deviation. */
  onsetUncertaintyS: number;
  /** When nine tenths of the rise were reached. */
  endS: number;
  nucleationC: number;
  plateauC: number;
  riseRateKPerS: number;
}

/** Why nothing was found; the first that holds, of what came closest. */
export type NoRecalescence =
  'past-melting' | 'not-supercooled' | 'too-slow' | 'never-cools' | 'no-rise' | 'flat' | 'too-short';

export interface FoundRecalescences {
  found: Recalescence[];
  /** `null` where something was found. */
  reason: NoRecalescence | null;
}

const LEAST_POINTS = 10;
const MOST_GROUPS = 20_000;
const MOST_FOUND = 20;
const LEAST_RISE_K = 0.2;
const NOISE_FACTOR = 8;
/** How many times steeper than the slope before it a rise has to be. */
const SLOPE_FACTOR = 4;
const PLATEAU_ABOVE_K = 1;
const REASONS: NoRecalescence[] = ['past-melting', 'not-supercooled', 'too-slow', 'never-cools'];

/**
 * Finds where a cooling temperature jumps back towards the melting point: the latent heat of the first crystals warms the
 * supercooled rest. A jump is a way up by more than 8 times the noise (at least 0.2 K) that begins below the melting point
 * or after cooling, is 4 times steeper than the line before it, and ends no more than 1 K (or a tenth of the jump) above the
 * melting point. What rises further was warmed from outside.
 *
 * @param trace seconds, rising or equal; °C, finite. Any rate, even or not; long traces are searched in 20,000 groups of
 * points and each jump is then measured on its own points.
 * @param meltingPointC of the material, `null` where it is not known: then only the shape speaks.
 * @returns at most 20, in the order of time, with a reason where there is none. Times and temperatures are those of the sensor:
 * its lag comes on top, delays the onset by up to its time constant and rounds the jump. Empty or short: 'too-short'.
 * Cost: some passes, one sort. NaN must not be in it.
 * Source: common practice of thermal analysis; thresholds checked on synthetic traces in the tests.
 */
export function findRecalescences(trace: TimeSeries, meltingPointC: number | null): FoundRecalescences {
  if (trace.timesS.length < LEAST_POINTS) return { found: [], reason: 'too-short' };
  const grouped = groupMeans(trace, MOST_GROUPS);
  const noise = noiseOf(grouped.values);
  const smooth = { timesS: grouped.timesS, values: medianOfFive(grouped.values) };
  const least = Math.max(LEAST_RISE_K, NOISE_FACTOR * noise);
  const legs = upwardLegs(smooth.values, least);
  if (legs.length === 0) return { found: [], reason: spanOf(smooth.values) < least ? 'flat' : 'no-rise' };
  const judged = legs.map((leg) =>
    judgeLeg({ trace, grouped, smooth }, { leg, noise, least, meltingPointC }),
  );
  const found = judged.filter((result) => typeof result !== 'string').slice(0, MOST_FOUND);
  const reason = REASONS.find((candidate) => judged.includes(candidate)) ?? 'too-slow';
  return { found, reason: found.length > 0 ? null : reason };
}

interface Judging {
  leg: Leg;
  noise: number;
  least: number;
  meltingPointC: number | null;
}

/** The trace at its three grains: every point, groups of them, and those without spikes. */
type Grains = Record<'trace' | 'grouped' | 'smooth', TimeSeries>;

function judgeLeg(
  { trace, grouped, smooth }: Grains,
  { leg, noise, least, meltingPointC }: Judging,
): Recalescence | NoRecalescence {
  const end = kneeOf(smooth, leg, noise);
  const plateauC = plateauOf(smooth, { leg, end, least });
  const rough = measureRise(grouped, {
    from: leg.from,
    low: lowestNear(grouped.values, leg.low, end),
    end,
    topValue: plateauC,
    noise,
  });
  const hasCooled = smooth.values[leg.from]! - smooth.values[leg.low]! >= least;
  if (rough === null) return 'never-cools';
  const heightK = plateauC - rough.startValue;
  if (meltingPointC === null && !hasCooled) return 'never-cools';
  if (heightK < NOISE_FACTOR * rough.noiseBefore || rough.rate < SLOPE_FACTOR * Math.abs(rough.slopeBefore))
    return 'too-slow';
  if (meltingPointC !== null) {
    const margin = Math.max(LEAST_RISE_K, 3 * rough.noiseBefore);
    if (rough.startValue > meltingPointC - margin) return 'not-supercooled';
    if (plateauC > meltingPointC + Math.max(PLATEAU_ABOVE_K, 0.1 * heightK)) return 'past-melting';
  }
  const rise = refined(trace, rough, plateauC);
  return {
    onsetS: rise.onsetS,
    onsetUncertaintyS: rise.onsetUncertaintyS,
    endS: rise.t90S,
    nucleationC: rise.startValue,
    plateauC,
    riseRateKPerS: rise.rate,
  };
}

/** The median clips the tip of a valley: the point itself is a little further on. */
function lowestNear(values: Float64Array, low: number, end: number): number {
  let lowest = low;
  for (let n = Math.max(0, low - 2); n <= Math.min(low + 4, end); n++)
    if (values[n]! < values[lowest]!) lowest = n;
  return lowest;
}

/** Where the way up bends into the plateau: the point farthest above the chord from low to high, or the high itself. */
function kneeOf({ timesS, values }: TimeSeries, { low, high }: Leg, noise: number): number {
  const height = values[high]! - values[low]!;
  const slope = height / Math.max(timesS[high]! - timesS[low]!, Number.MIN_VALUE);
  let [knee, farthest] = [high, Math.max(3 * noise, 0.05 * height)];
  for (let n = low + 1; n < high; n++) {
    const above = values[n]! - values[low]! - slope * (timesS[n]! - timesS[low]!);
    if (above > farthest) [knee, farthest] = [n, above];
  }
  return knee;
}

/**
 * Median of what lies near the highest value after the knee, until the curve falls away from it and at most five times as long as
 * the rise took: the tail of a sensor that lags is left out.
 */
function plateauOf(
  { timesS, values }: TimeSeries,
  { leg, end, least }: { leg: Leg; end: number; least: number },
): number {
  const untilS = timesS[end]! + 5 * (timesS[end]! - timesS[leg.low]!);
  let [highest, last] = [end, end];
  while (last < values.length && (timesS[last]! <= untilS || last < end + 3)) {
    if (values[last]! < values[highest]! - least) break;
    if (values[last]! > values[highest]!) highest = last;
    last++;
  }
  const near = [...values.subarray(end, last)].filter((value) => value >= values[highest]! - least);
  return near.sort((a, b) => a - b)[near.length >> 1] ?? values[end]!;
}

const REFINEMENTS = 4;
const POINTS_OF_WINDOW = 2000;
const POINTS_ON_FLANK = 8;

/** The same on the points of the trace about the rise, closer each time, until the flank has points enough or there are no more. */
function refined(trace: TimeSeries, rough: Rise, topValue: number): Rise {
  let rise = rough;
  for (let n = 0; n < REFINEMENTS && rise.t50S - rise.t10S < POINTS_ON_FLANK * rise.stepS; n++) {
    const points = windowOf(trace, rise);
    const window = groupMeans(points, POINTS_OF_WINDOW);
    const finer = riseWithin(window, topValue);
    if (finer === null || finer.stepS >= rise.stepS) return finer?.stepS === rise.stepS ? finer : rise;
    rise = finer;
  }
  return rise;
}

function windowOf({ timesS, values }: TimeSeries, { t10S, t90S, stepS }: Rise): TimeSeries {
  const flankS = Math.max(t90S - t10S, stepS);
  const first = firstAtLeast(timesS, t10S - 25 * flankS);
  const end = firstAtLeast(timesS, t90S + 2 * flankS);
  return { timesS: timesS.subarray(first, end), values: values.subarray(first, end) };
}

function riseWithin({ timesS, values }: TimeSeries, topValue: number): Rise | null {
  if (values.length < LEAST_POINTS) return null;
  let low = 0;
  for (let n = 1; n < values.length; n++) if (values[n]! < values[low]!) low = n;
  let end = low;
  while (end < values.length - 1 && values[end]! < topValue) end++;
  const noise = noiseOf(values.subarray(0, low));
  return measureRise({ timesS, values }, { from: 0, low, end, topValue, noise });
}

function firstAtLeast(timesS: Float64Array, timeS: number): number {
  let [low, high] = [0, timesS.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (timesS[middle]! < timeS) low = middle + 1;
    else high = middle;
  }
  return low;
}

function spanOf(values: Float64Array): number {
  let [low, high] = [Infinity, -Infinity];
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return high - low;
}
