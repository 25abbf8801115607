import type { TimeSeries } from './temperature-legs.ts';

/** A rise and the straight line before it. */
export interface Rise {
  onsetS: number;
  onsetUncertaintyS: number;
  /** Of the line before it, at the onset. */
  startValue: number;
  slopeBefore: number;
  /** Deviation of the values before it from their line. */
  noiseBefore: number;
  /** Slope between a tenth and a half of the rise. */
  rate: number;
  t10S: number;
  t50S: number;
  t90S: number;
  /** Time between neighbouring points about the onset. */
  stepS: number;
}

interface Edges {
  /** First point of the line before. */
  from: number;
  low: number;
  /** Where the rise has ended. */
  end: number;
  topValue: number;
  noise: number;
}

const MOST_BASE_POINTS = 200;
const LEAST_BASE_POINTS = 4;
/** By how much of its length the foot of a rise may be rounded, for example by the lag of the sensor. */
const FOOT_SHARE = 0.05;

/**
 * Measures a rise: the line before it by least squares, the chord between a tenth and a half of its height, and the onset where
 * the two meet. The uncertainty (one standard deviation) adds rounding to the points, noise over slope, and a twentieth of the
 * time from a tenth to nine tenths, since a sensor that lags rounds the foot; the lag itself is not known and not taken off.
 * Units: seconds and those of the values. `null` where no four points lie before the rise.
 * Source: common practice (tangent construction).
 */
export function measureRise({ timesS, values }: TimeSeries, edges: Edges): Rise | null {
  const { low, end, topValue, noise } = edges;
  const height = topValue - values[low]!;
  const at = (share: number) => crossingS({ timesS, values }, low, end, values[low]! + share * height);
  const rough = { t10S: at(0.1), t50S: at(0.5) };
  const lastBase = lastBefore(timesS, rough.t10S - (rough.t50S - rough.t10S), edges);
  const most = Math.min(MOST_BASE_POINTS, Math.max(8, Math.floor((lastBase - edges.from) / 3)));
  const firstBase = Math.max(edges.from, lastBase - most + 1);
  if (lastBase - firstBase + 1 < LEAST_BASE_POINTS) return null;
  const base = lineThrough({ timesS, values }, firstBase, lastBase);
  const startValue = base.value(rough.t10S);
  const level = (share: number) =>
    crossingS({ timesS, values }, low, end, startValue + share * (topValue - startValue));
  const [t10S, t50S, t90S] = [level(0.1), level(0.5), level(0.9)];
  const stepS = stepAt(timesS, t10S);
  const rate = (0.4 * (topValue - startValue)) / Math.max(t50S - t10S, stepS * 0.4);
  const isOneStep = t50S - t10S < 0.5 * stepS;
  const before = timesS[lastBefore(timesS, t50S, edges)]!;
  const tangentS =
    t10S - (startValue + 0.1 * (topValue - startValue) - base.value(t10S)) / (rate - base.slope);
  const onsetS = isOneStep ? before + stepS / 2 : Math.min(tangentS, t10S);
  const noiseBefore = Math.max(base.deviation, noise);
  const spread = [stepS / Math.sqrt(12), noiseBefore / rate, FOOT_SHARE * (t90S - t10S)];
  return {
    onsetS,
    onsetUncertaintyS: Math.hypot(...spread),
    startValue: base.value(onsetS),
    slopeBefore: base.slope,
    noiseBefore,
    rate,
    t10S,
    t50S,
    t90S,
    stepS,
  };
}

/** Half-way between the first time above a level and the last time below it, so that noise moves it little. */
function crossingS({ timesS, values }: TimeSeries, from: number, end: number, level: number): number {
  let first = from;
  while (first < end && values[first]! < level) first++;
  let last = end;
  while (last > from && values[last]! >= level) last--;
  return (crossedAt(first - 1, first) + crossedAt(last, last + 1)) / 2;

  function crossedAt(before: number, after: number): number {
    if (before < from || after > end) return timesS[Math.min(Math.max(from, before), end)]!;
    const rise = values[after]! - values[before]!;
    const share = rise > 0 ? Math.min(1, Math.max(0, (level - values[before]!) / rise)) : 0.5;
    return timesS[before]! + share * (timesS[after]! - timesS[before]!);
  }
}

function lastBefore(timesS: Float64Array, timeS: number, { from, end }: Edges): number {
  let last = end;
  while (last > from && timesS[last]! >= timeS) last--;
  return last;
}

function stepAt(timesS: Float64Array, timeS: number): number {
  let n = 1;
  while (n < timesS.length - 1 && timesS[n]! < timeS) n++;
  return Math.max(timesS[n]! - timesS[n - 1]!, Number.MIN_VALUE);
}

/** Least squares; times are counted from the last point, where the line is used. */
function lineThrough({ timesS, values }: TimeSeries, first: number, last: number) {
  const origin = timesS[last]!;
  const count = last - first + 1;
  let [sumT, sumV, sumTT, sumTV] = [0, 0, 0, 0];
  for (let n = first; n <= last; n++) {
    const time = timesS[n]! - origin;
    sumT += time;
    sumV += values[n]!;
    sumTT += time * time;
    sumTV += time * values[n]!;
  }
  const width = sumTT - (sumT * sumT) / count;
  const slope = width > 0 ? (sumTV - (sumT * sumV) / count) / width : 0;
  const value = (timeS: number) => sumV / count + slope * (timeS - origin - sumT / count);
  let squares = 0;
  for (let n = first; n <= last; n++) squares += (values[n]! - value(timesS[n]!)) ** 2;
  return { slope, value, deviation: Math.sqrt(squares / Math.max(1, count - 2)) };
}
