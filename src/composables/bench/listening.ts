import type { AudioContainer } from '@shared/audio/audio-format.ts';
import { highestCarrierShare, longestListenS } from '@shared/contract/listening.ts';
import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import type { RenditionQuery } from '@/api/views.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

/** How many times slower; 1 is at the speed of life. */
export const SLOW_FACTORS = [1, 2, 5, 10, 20, 50, 100] as const;
export type SlowFactor = (typeof SLOW_FACTORS)[number];

export const LOWEST_LEVEL_DB = -48;
export const HIGHEST_LEVEL_DB = 12;
export const FIRST_LEVEL_DB = -18;
/** Where no limiter stands behind it. */
export const HIGHEST_UNLIMITED_DB = -24;

export const LOWEST_CARRIER_HZ = 1000;
const USUAL_CARRIER_HZ = 40_000;
/** A carrier stands so far below what is to be heard. */
const BELOW_PEAK_HZ = 3000;

/** What a rendition of 48 kHz holds whole. */
const HEARD_BAND_HZ = 18_000;

/** Browsers play WAV up to this rate themselves; above it, and changed in any way, the server makes a rendition. */
const HIGHEST_PLAIN_RATE_HZ = 192_000;
/** A piece that is made at once: long enough to be ahead, short enough to begin soon. */
const PIECE_S = 15;
const PIECE_SAMPLES = 4_000_000;
/** A loop is one piece; what the server reads for one at most, with many channels in the file. */
const LOOP_SAMPLES = 8_000_000;
/** Fades of the renditions, which lie on one another where pieces join. */
export const JOINT_S = 0.005;

/** Of the files as they came in, browsers play these; not all of their forms. */
export function isPlayedByBrowsers(container: AudioContainer): boolean {
  return container === 'RIFF' || container === 'FLAC';
}

export interface PlayPlan {
  source: 'original' | 'rendition';
  /** What is heard, in samples of the recording; the end is exclusive. */
  startSample: number;
  endSample: number;
  aids: ListeningAids;
  /** Place of `startSample` in what is played. */
  offsetS: number;
  /** Samples of the recording that pass in one second of listening. */
  samplesPerSecond: number;
}

export interface PlayFacts {
  sampleRateHz: number;
  isOriginalPlayable: boolean;
  isLooping: boolean;
}

/** How a span is played; a long one as far as it is made at once. */
export function planPlay(span: TimeWindow, aids: ListeningAids, facts: PlayFacts): PlayPlan {
  const { sampleRateHz, isOriginalPlayable, isLooping } = facts;
  const startSample = Math.max(0, Math.floor(span.startSample));
  const wantedEnd = Math.max(startSample + 1, Math.ceil(span.endSample));
  const samplesPerSecond = sampleRateHz / aids.slow;
  const isUnchanged = aids.mode === 'as-recorded' && aids.gate === 'off';
  if (isUnchanged && isOriginalPlayable && !isLooping && sampleRateHz <= HIGHEST_PLAIN_RATE_HZ) {
    const offsetS = startSample / sampleRateHz;
    return { source: 'original', startSample, endSample: wantedEnd, aids, offsetS, samplesPerSecond };
  }
  const mostSamples = isLooping
    ? Math.min(LOOP_SAMPLES, Math.floor(longestListenS * samplesPerSecond))
    : Math.min(PIECE_SAMPLES, Math.floor(PIECE_S * samplesPerSecond));
  const endSample = Math.min(wantedEnd, startSample + Math.max(1, mostSamples));
  return { source: 'rendition', startSample, endSample, aids, offsetS: 0, samplesPerSecond };
}

/** Where the piece after this one begins: its fade in lies on the fade out of this one. */
export function nextPieceStart({ endSample, samplesPerSecond }: PlayPlan): number {
  return endSample - Math.round(JOINT_S * samplesPerSecond);
}

export function renditionQuery(plan: PlayPlan, channel: number, noise: TimeWindow | null): RenditionQuery {
  const { startSample, endSample, aids } = plan;
  return {
    channel,
    startSample,
    endSample,
    slow: aids.slow,
    ...(aids.carrierHz === null ? {} : { shiftHz: aids.carrierHz }),
    ...gateQuery(aids, noise),
  };
}

function gateQuery({ gate }: ListeningAids, noise: TimeWindow | null): Partial<RenditionQuery> {
  if (gate === 'off') return {};
  if (gate === 'machine' || !noise) return { gate: 'machine' };
  return { gate: 'span', gateStartSample: noise.startSample, gateEndSample: noise.endSample };
}

export function sampleHeard(plan: PlayPlan, timeS: number): number {
  return plan.startSample + (timeS - plan.offsetS) * plan.samplesPerSecond;
}

export function gainOf(levelDb: number, isLimited: boolean): number {
  return 10 ** (Math.min(levelDb, isLimited ? HIGHEST_LEVEL_DB : HIGHEST_UNLIMITED_DB) / 20);
}

/** Whole hundreds of hertz that the server takes. */
export function clampCarrier(hz: number, sampleRateHz: number): number {
  const highestHz = Math.floor((highestCarrierShare * sampleRateHz) / 100) * 100;
  return Math.min(highestHz, Math.max(LOWEST_CARRIER_HZ, Math.round(hz / 100) * 100));
}

/** Of what is heard while shifted, the highest frequency in the recording. */
export function heardBandHz(carrierHz: number, slow: number, sampleRateHz: number): number {
  return Math.min(sampleRateHz / 2, carrierHz + HEARD_BAND_HZ * slow);
}

/** Below the strongest frequency of what is in hand; without one, where much is to be heard. */
export function firstCarrier(sampleRateHz: number, peakFrequencyHz: number | null): number {
  const besidePeak = peakFrequencyHz === null ? null : peakFrequencyHz - BELOW_PEAK_HZ;
  return clampCarrier(besidePeak ?? Math.min(USUAL_CARRIER_HZ, sampleRateHz / 4), sampleRateHz);
}
