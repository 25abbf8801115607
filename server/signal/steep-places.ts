import { median } from './noise-floor.ts';

/** Where the energy rises most, in places of the samples. */
export interface SteepPlace {
  readonly place: number;
  /** Whether it rises by the step over what was right before, and clear of the noise. */
  readonly isStep: boolean;
  readonly rise: number;
  /** Mean energy from the place on. */
  readonly power: number;
  readonly smoothing: number;
}

export interface PlaceSearch {
  /** Places [from, to) may be found. */
  readonly from: number;
  readonly to: number;
  /** Samples at the beginning that the filter needs. */
  readonly settle: number;
  /** Least distance of two places. */
  readonly apart: number;
  /** Mean square of the noise. */
  readonly noise: number;
  /** Background inside the region, the noise or more. */
  readonly level: number;
  /** Rise that begins a new burst inside another one. */
  readonly step: number;
  /** Samples over which energies are averaged exponentially. */
  readonly smoothing: number;
  /** Mean energy over the noise that chance does not explain. */
  readonly clear: number;
  /** Whether the highest rise need not be a step. */
  readonly takesHighest: boolean;
}

/**
 * Places of the largest rises in order of time: R = Q / (P + m), where P is the exponential mean of the squares before a place, Q that from it
 * on, and m that of the noise. The highest rise, and all that are steps.
 */
export function steepPlaces(filtered: Float64Array, search: PlaceSearch): SteepPlace[] {
  const { apart, level, step, clear, noise, smoothing } = search;
  const { past, future } = oneSidedMeans(filtered, search);
  const maxima = risingMaxima(past, future, search).sort((a, b) => b.rise - a.rise || a.place - b.place);
  const places: SteepPlace[] = [];
  for (const { place, rise } of maxima) {
    if (places.some((other) => Math.abs(other.place - place) < apart)) continue;
    // What comes before a later, larger rise must stand without it: the mean of the future already feels it.
    const next = places.reduce(
      (least, other) => (other.place > place && other.place < least ? other.place : least),
      Infinity,
    );
    const power = future[place]!;
    const later = next === Infinity ? 0 : future[next]! * Math.exp((place - next) / smoothing);
    const isStep = power - later > Math.max(step * past[place]! + clear * noise, clear * level);
    if (isStep || (places.length === 0 && search.takesHighest))
      places.push({ place, isStep, rise, power, smoothing });
  }
  return places.sort((a, b) => a.place - b.place);
}

/**
 * What the background may have become inside a long region: where a level lasts it is no burst, and chance rises of it are
 * no onsets. The median of squared normal values is 0.4549 of their mean.
 */
export function backgroundOf(filtered: Float64Array, noise: number, longSamples: number): number {
  if (filtered.length < longSamples) return noise;
  const stride = Math.max(1, Math.floor(filtered.length / 1000));
  const squares = new Float64Array(Math.floor(filtered.length / stride));
  for (let k = 0; k < squares.length; k++) squares[k] = filtered[k * stride]! ** 2;
  return Math.max(noise, median(squares) / 0.4549);
}

/** Means of the energy before and from each sample on, exponential, starting from the noise at both ends. */
function oneSidedMeans(filtered: Float64Array, { settle, smoothing, noise }: PlaceSearch) {
  const count = filtered.length;
  const keep = Math.exp(-1 / smoothing);
  const take = 1 - keep;
  const future = new Float64Array(count);
  let mean = noise;
  for (let n = count - 1; n >= 0; n--) {
    const value = filtered[n]!;
    mean = keep * mean + take * (value * value);
    future[n] = mean;
  }
  const past = new Float64Array(count).fill(noise, 0, settle);
  mean = noise;
  for (let n = settle; n < count; n++) {
    const value = filtered[n]!;
    past[n] = mean;
    mean = keep * mean + take * (value * value);
  }
  return { past, future };
}

/** Local maxima of the rise: the highest, and those that may stand as bursts of their own. */
function risingMaxima(
  past: Float64Array,
  future: Float64Array,
  { from, to, noise, step, clear }: PlaceSearch,
) {
  const maxima: { place: number; rise: number }[] = [];
  let highest = { place: -1, rise: 0 };
  let before = 0;
  let here = future[from]! / (past[from]! + noise);
  for (let n = from; n < to; n++) {
    const after = n + 1 < future.length ? future[n + 1]! / (past[n + 1]! + noise) : 0;
    if (here >= before && here > after) {
      if (here > highest.rise) highest = { place: n, rise: here };
      if (future[n]! > step * past[n]! + clear * noise) maxima.push({ place: n, rise: here });
    }
    before = here;
    here = after;
  }
  if (highest.place >= 0 && maxima.every(({ place }) => place !== highest.place)) maxima.push(highest);
  return maxima;
}
