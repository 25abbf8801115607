import type { AudioContainer } from '@shared/audio/audio-format.ts';
import { longestListenS } from '@shared/contract/listening.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { formatDuration, formatFrequency } from '@/composables/useFormat.ts';

/** How many times slower; 1 is as recorded. */
export const SLOW_FACTORS = [1, 2, 5, 10, 20, 50, 100] as const;
export type SlowFactor = (typeof SLOW_FACTORS)[number];

/** The loudest a listener can choose: a full-scale click then still keeps 6 dB to full scale. */
export const HIGHEST_LEVEL_DB = -6;
export const LOWEST_LEVEL_DB = -48;
export const FIRST_LEVEL_DB = -18;

/** Browsers play WAV up to this rate themselves; above it, and slowed, the server makes a rendition. */
const HIGHEST_PLAIN_RATE_HZ = 192_000;
/** What the server reads for one rendition at most. */
const MOST_INPUT_SAMPLES = 24_000_000;

/** Of the files as they came in, browsers play these; not all of their forms. */
export function isPlayedByBrowsers(container: AudioContainer): boolean {
  return container === 'RIFF' || container === 'FLAC';
}

export interface PlayPlan {
  source: 'original' | 'rendition';
  /** What is heard, in samples of the recording; the end is exclusive. */
  startSample: number;
  endSample: number;
  slow: SlowFactor;
  /** Place of `startSample` in what is played. */
  offsetS: number;
  /** Samples of the recording that pass in one second of listening. */
  samplesPerSecond: number;
}

export function planPlay(
  span: TimeWindow,
  slow: SlowFactor,
  recording: { sampleRateHz: number; isOriginalPlayable: boolean },
): PlayPlan {
  const { sampleRateHz, isOriginalPlayable } = recording;
  const startSample = Math.max(0, Math.floor(span.startSample));
  const wantedEnd = Math.max(startSample + 1, Math.ceil(span.endSample));
  const samplesPerSecond = sampleRateHz / slow;
  if (slow === 1 && isOriginalPlayable && sampleRateHz <= HIGHEST_PLAIN_RATE_HZ) {
    const offsetS = startSample / sampleRateHz;
    return { source: 'original', startSample, endSample: wantedEnd, slow, offsetS, samplesPerSecond };
  }
  const mostSamples = Math.min(MOST_INPUT_SAMPLES, Math.floor(longestListenS * samplesPerSecond));
  const endSample = Math.min(wantedEnd, startSample + mostSamples);
  return { source: 'rendition', startSample, endSample, slow, offsetS: 0, samplesPerSecond };
}

export function sampleHeard(plan: PlayPlan, currentTimeS: number): number {
  return plan.startSample + (currentTimeS - plan.offsetS) * plan.samplesPerSecond;
}

export function gainOf(levelDb: number): number {
  return 10 ** (Math.min(levelDb, HIGHEST_LEVEL_DB) / 20);
}

/** Says what is heard: "20 times slower: 150 kHz is heard as 7.5 kHz". */
export function heardWords(slow: SlowFactor, sampleRateHz: number, peakFrequencyHz: number | null): string {
  if (slow === 1) {
    return sampleRateHz / 2 > HEARING_LINE_HZ ? 'As recorded: heard up to 20 kHz' : 'As recorded';
  }
  const exampleHz = peakFrequencyHz ?? exampleFrequency(slow, sampleRateHz);
  return `${slow} times slower: ${formatFrequency(exampleHz)} is heard as ${formatFrequency(exampleHz / slow)}`;
}

/** A round frequency that the recording holds and that is heard well when slowed. */
function exampleFrequency(slow: number, sampleRateHz: number): number {
  const rounds = [400_000, 200_000, 150_000, 100_000, 50_000, 20_000, 10_000, 5000];
  return rounds.find((hz) => hz < sampleRateHz / 2.2 && hz / slow <= 15_000) ?? 1000;
}

/** "20 ms lasts 0.4 s" */
export function lastsWords(samples: number, sampleRateHz: number, slow: SlowFactor): string {
  const seconds = samples / sampleRateHz;
  return `${formatDuration(seconds, 2)} lasts ${formatDuration(seconds * slow, 2)}`;
}
