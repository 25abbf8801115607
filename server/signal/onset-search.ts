import type { SourceSignal } from './band-energy.ts';
import { chiSquareThreshold } from './chi-square.ts';
import { type Biquad, butterworth, filterInPlace, groupDelaySamples } from './biquad.ts';
import type { DetectorSettings } from './detector-settings.ts';
import type { ActiveRegion } from './active-region.ts';
import { pickOnset } from './onset.ts';
import { backgroundOf, steepPlaces, type SteepPlace } from './steep-places.ts';

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
  /** Whether the energy rises by a step over what was right before, not only over the floor. */
  readonly isStep: boolean;
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
/** Averages that are longer by this are made twice. */
const LONGER_SMOOTHING = 1.3;
/** Mean power of the best window over the floor, over the octave, from which the octave is searched as a whole. */
const LOUD_OCTAVE = 10;
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
 * The samples are limited to the band that stood out (see `steepPlaces`): averaged for long enough to see the burst at all, its highest rise is
 * the region's onset; averaged over two periods, every rise by a step is an onset of its own, so that a second click is found within
 * the ringing of the first. The place is refined by Akaike's criterion about it, and the group delays of the filters are taken off.
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
  const noise = region.noisePerHz * source.decimation ** 2 * (band.highHz - band.lowHz);
  const places = placesIn(filtered, {
    from: Math.max(
      settle,
      Math.floor(region.startSample / source.decimation - first - band.smoothingS * rateHz),
    ),
    to: Math.min(filtered.length, Math.ceil(region.endSample / source.decimation) - first),
    settle,
    noise,
    ...{ region, band, settings, rateHz },
  });
  return places.flatMap(({ place, isStep, rise, power, smoothing }, index) => {
    const before = Math.max(settle, index > 0 ? (places[index - 1]?.place ?? 0) + smoothing / 2 : 0);
    const start = Math.floor(Math.max(before, place - 4 * smoothing));
    const end = Math.min(filtered.length, Math.ceil(place + 1.5 * smoothing));
    const pick = pickOnset(filtered.subarray(start, end), {
      minimumStepDb: settings.onsetGateDb,
      independentShare: Math.min(1, (2 * (band.highHz - band.lowHz)) / rateHz),
    });
    if (!pick) return [];
    const inFilter = first + start + pick.index - delay * visibleDelay(power / noise);
    const { evidence, lowHz, highHz, startSample, endSample, bestStartSample, bestEndSample } = region;
    return [
      {
        sample: Math.max(0, Math.round(source.inputSample(inFilter, band.centreHz))),
        uncertaintySamples: pick.uncertaintySamples * source.decimation,
        ...{ evidence, rise, lowHz, highHz, startSample, endSample, bestStartSample, bestEndSample, isStep },
        sine: null,
      },
    ];
  });
}

interface RegionPlaces {
  readonly from: number;
  readonly to: number;
  readonly settle: number;
  readonly noise: number;
  readonly region: ActiveRegion;
  readonly band: ReturnType<typeof searchBand>;
  readonly settings: DetectorSettings;
  readonly rateHz: number;
}

/** The highest rise by the long averages, where no step of the short ones lies near, and all steps of the short ones. */
function placesIn(filtered: Float64Array, options: RegionPlaces): SteepPlace[] {
  const { from, to, settle, noise, region, band, settings, rateHz } = options;
  if (to <= from) return [];
  const level = backgroundOf(filtered.subarray(from, to), noise, LONG_REGION_S * rateHz);
  const step = 10 ** (settings.stepDb / 10);
  const placesAt = (smoothingS: number, takesHighest: boolean) => {
    const smoothing = smoothingS * rateHz;
    const apart = Math.max(settings.shortestSeparationS * rateHz, smoothing);
    const clear = clearRatio(Math.max(1, Math.round(4 * (band.highHz - band.lowHz) * smoothingS)));
    return steepPlaces(filtered, {
      from,
      to,
      settle,
      noise,
      level,
      step,
      smoothing,
      apart,
      clear,
      takesHighest,
    });
  };
  const wide = placesAt(band.smoothingS, !region.continues);
  if (band.smoothingS < LONGER_SMOOTHING * band.shortestS) return wide;
  const sharp = placesAt(band.shortestS, false);
  const alone = wide.filter(({ place, smoothing }) =>
    sharp.every((other) => Math.abs(other.place - place) > smoothing),
  );
  return [...sharp, ...alone].sort((a, b) => a.place - b.place);
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

/** The band that stood out, or the whole octave where that stands out as well: another burst may lie elsewhere in it. */
function searchBand(region: ActiveRegion, sampleRateHz: number) {
  const { octaveLowHz, powerRatio } = region;
  const share = (region.highHz - region.lowHz) / octaveLowHz;
  const isLoud = (powerRatio - 1) * share > LOUD_OCTAVE;
  const centreHz = Math.sqrt(region.lowHz * region.highHz);
  const edges = isLoud
    ? { lowHz: octaveLowHz, highHz: 2 * octaveLowHz }
    : {
        lowHz: Math.min(region.lowHz, centreHz / LEAST_HALF_BAND_RATIO),
        highHz: Math.max(region.highHz, centreHz * LEAST_HALF_BAND_RATIO),
      };
  const lowHz = 0.95 * edges.lowHz;
  const highHz = Math.min(sampleRateHz / 2, 1.05 * edges.highHz);
  const shortestS = PERIODS_PER_SMOOTHING / centreHz;
  const windowS = (region.bestEndSample - region.bestStartSample) / sampleRateHz;
  const wanted = LOUD_ENOUGH / (region.powerRatio * (region.highHz - region.lowHz));
  const smoothingS = Math.max(shortestS, Math.min(wanted, windowS / 2));
  return { centreHz, lowHz, highHz, smoothingS, shortestS };
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
