import type { SourceSignal } from './band-energy.ts';
import { chiSquareThreshold } from './chi-square.ts';
import { type Biquad, butterworth, filterInPlace, groupDelaySamples } from './biquad.ts';
import type { DetectorSettings } from './detector-settings.ts';
import { median } from './noise-floor.ts';
import type { ActiveRegion } from './active-region.ts';
import { pickOnset } from './onset.ts';

/** An onset found in one octave. Places are samples of the input. */
export interface OnsetFound {
  readonly sample: number;
  readonly uncertaintySamples: number;
  /** Log-likelihood of the region, and the rise at this onset, both for choosing between octaves. */
  readonly evidence: number;
  readonly rise: number;
  readonly lowHz: number;
  readonly highHz: number;
  /** The region it lies in. */
  readonly startSample: number;
  readonly endSample: number;
  readonly bestStartSample: number;
  readonly bestEndSample: number;
  /** The damped sine that fits it. */
  readonly sine: FittedSine | null;
}

export interface FittedSine {
  readonly octave: number;
  readonly statistic: number;
  readonly decaySamples: number;
  /** Whether it rests on the sine alone: the energy would not have been enough. */
  readonly alone: boolean;
}

export interface OnsetSearch {
  /** Holds the samples about the region. */
  readonly source: SourceSignal;
  readonly region: ActiveRegion;
  readonly sampleRateHz: number;
  readonly settings: DetectorSettings;
}

const LEAST_HALF_BAND_RATIO = 1.19;
const PERIODS_PER_SMOOTHING = 2;
const LOUD_ENOUGH = 40;
/** A region longer than this may be a change of the background. */
const LONG_REGION_S = 0.02;
/** Chance that noise gives one smoothed energy as high as a new burst's. */
const STEP_CHANCE = 1e-5;

/** Samples of the input that the search of a region reads: [start, end). */
export function searchReach(region: ActiveRegion, sampleRateHz: number): { start: number; end: number } {
  const { smoothingS, lowHz } = searchBand(region, sampleRateHz);
  const lead = (6 * smoothingS + 6 / lowHz) * sampleRateHz;
  return { start: region.startSample - lead, end: region.endSample + lead / 2 };
}

/**
 * Onsets inside an active region: where the energy that follows stands most over the energy that came before.
 *
 * The samples are limited to the band that stood out; two one-sided exponential means of the squared result, one of the
 * past P and one of the future Q, give the rise R = Q / (P + m noise). The largest rise is the region's onset; others
 * count where R exceeds the step. A second click is so found within the ringing of the first. The place is refined by
 * Akaike's criterion about the largest rise, and the group delays of the filters are taken off.
 */
export function findOnsets({ source, region, sampleRateHz, settings }: OnsetSearch): OnsetFound[] {
  const rateHz = sampleRateHz / source.decimation;
  const band = searchBand(region, sampleRateHz);
  const sections = bandSections(band.lowHz, band.highHz, rateHz);
  const delay = groupDelaySamples(sections, band.centreHz, rateHz);
  const reach = searchReach(region, sampleRateHz);
  const first = Math.max(source.start, Math.floor(reach.start / source.decimation));
  const last = Math.min(source.end, Math.ceil(reach.end / source.decimation));
  const filtered = new Float64Array(
    source.values.subarray(source.origin + first, source.origin + Math.max(first, last)),
  );
  filterInPlace(filtered, sections);
  const settle = Math.min(filtered.length, Math.ceil((4 / band.lowHz) * rateHz));
  const smoothing = band.smoothingS * rateHz;
  const noise = region.noisePerHz * source.decimation ** 2 * (band.highHz - band.lowHz);
  const { past, future } = oneSidedMeans(filtered, settle, smoothing, noise);
  const from = Math.max(settle, Math.floor(region.startSample / source.decimation - first - smoothing));
  const to = Math.min(filtered.length, Math.ceil(region.endSample / source.decimation) - first);
  const apart = Math.max(settings.shortestSeparationS * rateHz, smoothing);
  const degrees = Math.max(1, Math.round(4 * (band.highHz - band.lowHz) * band.smoothingS));
  const clear = clearRatio(degrees);
  const step = 10 ** (settings.stepDb / 10);
  const level = from < to ? backgroundOf(filtered.subarray(from, to), noise, LONG_REGION_S * rateHz) : noise;
  const { continues } = region;
  const places = steepestPlaces({
    past,
    future,
    from,
    to,
    apart,
    noise,
    level,
    step,
    clear,
    smoothing,
    continues,
  });
  return places.flatMap((place, index) => {
    const before = Math.max(settle, index > 0 ? (places[index - 1] ?? 0) + smoothing / 2 : 0);
    const window = {
      from: Math.floor(Math.max(before, place - 4 * smoothing)),
      to: Math.min(filtered.length, Math.ceil(place + 1.5 * smoothing)),
    };
    const pick = pickOnset(filtered.subarray(window.from, window.to), {
      minimumStepDb: settings.onsetGateDb,
      independentShare: Math.min(1, (2 * (band.highHz - band.lowHz)) / rateHz),
    });
    if (!pick) return [];
    const inFilter = first + window.from + pick.index - delay * visibleDelay((future[place] ?? 0) / noise);
    return [
      {
        sample: Math.max(0, Math.round(source.inputSample(inFilter, band.centreHz))),
        uncertaintySamples: pick.uncertaintySamples * source.decimation,
        evidence: region.evidence,
        rise: (future[place] ?? 0) / ((past[place] ?? 0) + noise),
        lowHz: region.lowHz,
        highHz: region.highHz,
        startSample: region.startSample,
        endSample: region.endSample,
        bestStartSample: region.bestStartSample,
        bestEndSample: region.bestEndSample,
        sine: null,
      },
    ];
  });
}

const clearRatios = new Map<number, number>();

/** Mean of squared normal values over their variance that chance does not explain. */
function clearRatio(degrees: number): number {
  const ratio = clearRatios.get(degrees) ?? chiSquareThreshold(degrees, STEP_CHANCE) / degrees;
  clearRatios.set(degrees, ratio);
  return ratio;
}

export function bandSections(lowHz: number, highHz: number, sampleRateHz: number): Biquad[] {
  const sections = butterworth('highpass', 4, Math.min(lowHz, 0.45 * sampleRateHz), sampleRateHz);
  if (highHz >= 0.45 * sampleRateHz) return sections;
  return [...sections, ...butterworth('lowpass', 2, highHz, sampleRateHz)];
}

function searchBand(region: ActiveRegion, sampleRateHz: number) {
  const centreHz = Math.sqrt(region.lowHz * region.highHz);
  const lowHz = Math.min(region.lowHz * 0.95, centreHz / LEAST_HALF_BAND_RATIO);
  const highHz = Math.min(sampleRateHz / 2, Math.max(region.highHz * 1.05, centreHz * LEAST_HALF_BAND_RATIO));
  const shortest = PERIODS_PER_SMOOTHING / centreHz;
  const windowS = (region.bestEndSample - region.bestStartSample) / sampleRateHz;
  const wanted = LOUD_ENOUGH / (region.powerRatio * (highHz - lowHz));
  const smoothingS = Math.max(shortest, Math.min(wanted, windowS / 2));
  return { centreHz, lowHz, highHz, smoothingS };
}

/** Means of the energy before and from each sample on, exponential, starting from the noise at both ends. */
function oneSidedMeans(filtered: Float64Array, settle: number, smoothing: number, noise: number) {
  const count = filtered.length;
  const keep = Math.exp(-1 / smoothing);
  const take = 1 - keep;
  const future = new Float64Array(count);
  let mean = noise;
  for (let n = count - 1; n >= 0; n--) {
    mean = keep * mean + take * (filtered[n] ?? 0) ** 2;
    future[n] = mean;
  }
  const past = new Float64Array(count).fill(noise, 0, settle);
  mean = noise;
  for (let n = settle; n < count; n++) {
    past[n] = mean;
    mean = keep * mean + take * (filtered[n] ?? 0) ** 2;
  }
  return { past, future };
}

/**
 * What the background may have become inside a long region: where a level lasts it is no burst, and chance rises of it are
 * no onsets. The median of squared normal values is 0.4549 of their mean.
 */
function backgroundOf(filtered: Float64Array, noise: number, longSamples: number): number {
  if (filtered.length < longSamples) return noise;
  const stride = Math.max(1, Math.floor(filtered.length / 1000));
  const squares = Float64Array.from(
    { length: Math.floor(filtered.length / stride) },
    (_, k) => (filtered[k * stride] ?? 0) ** 2,
  );
  return Math.max(noise, median(squares) / 0.4549);
}

interface PlaceSearch {
  readonly past: Float64Array;
  readonly future: Float64Array;
  readonly from: number;
  readonly to: number;
  readonly apart: number;
  readonly noise: number;
  readonly smoothing: number;
  /** Background inside the region, the noise or more. */
  readonly level: number;
  /** Rise that begins a new burst inside another one. */
  readonly step: number;
  /** Whether the region goes on from another one, so that its highest rise need not be an onset. */
  readonly continues: boolean;
  /** Mean energy over the noise that chance does not explain. */
  readonly clear: number;
}

/** Places of the largest rises in order of time, none nearer to another than `apart`. */
function steepestPlaces(search: PlaceSearch): number[] {
  const { past, future, apart, level, step, clear, smoothing, continues } = search;
  const maxima = risingMaxima(search).sort((a, b) => b.rise - a.rise || a.place - b.place);
  const places: number[] = [];
  for (const { place } of maxima) {
    if (places.some((other) => Math.abs(other - place) < apart)) continue;
    // What comes before a later, larger rise must stand without it: the mean of the future already feels it.
    const next = places.reduce((least, other) => (other > place && other < least ? other : least), Infinity);
    const later = next === Infinity ? 0 : (future[next] ?? 0) * Math.exp((place - next) / smoothing);
    const stands =
      (future[place] ?? 0) - later >
      Math.max(step * (past[place] ?? 0) + clear * search.noise, clear * level);
    if (stands || (places.length === 0 && !continues)) places.push(place);
  }
  return places.sort((a, b) => a - b);
}

/** Local maxima of the rise: the highest, and those that may stand as bursts of their own. */
function risingMaxima({
  past,
  future,
  from,
  to,
  noise,
  step,
  clear,
}: PlaceSearch): { place: number; rise: number }[] {
  const maxima: { place: number; rise: number }[] = [];
  let highest = { place: -1, rise: 0 };
  let before = 0;
  let here = (future[from] ?? 0) / ((past[from] ?? 0) + noise);
  for (let n = from; n < to; n++) {
    const after = n + 1 < future.length ? (future[n + 1] ?? 0) / ((past[n + 1] ?? 0) + noise) : 0;
    if (here >= before && here > after) {
      if (here > highest.rise) highest = { place: n, rise: here };
      if ((future[n] ?? 0) > step * (past[n] ?? 0) + clear * noise) maxima.push({ place: n, rise: here });
    }
    before = here;
    here = after;
  }
  if (highest.place >= 0 && !maxima.some(({ place }) => place === highest.place)) maxima.push(highest);
  return maxima;
}

const VISIBLE_DELAY: readonly (readonly [number, number])[] = [
  [6, 0.85],
  [12, 0.72],
  [18, 0.6],
  [21, 0.48],
  [24, 0.33],
  [27, 0.25],
  [33, 0.2],
];

/**
 * Share of the filter's group delay after which an onset stands out behind it: a loud click is seen while the filter
 * only begins to answer. Found by trial with damped sines of 10 to 60 cycles.
 */
function visibleDelay(powerOverNoise: number): number {
  const level = 10 * Math.log10(powerOverNoise);
  let previous = VISIBLE_DELAY[0] ?? [0, 1];
  for (const point of VISIBLE_DELAY) {
    if (level <= point[0]) {
      const along =
        point[0] === previous[0]
          ? 1
          : (Math.max(level, previous[0]) - previous[0]) / (point[0] - previous[0]);
      return previous[1] + along * (point[1] - previous[1]);
    }
    previous = point;
  }
  return previous[1];
}
