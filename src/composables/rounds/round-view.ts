import type { Candidate } from '@shared/contract/candidates.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { SLOW_FACTORS } from '@/composables/bench/listening.ts';
import type { SlowFactor } from '@/composables/bench/listening.ts';
import { clampWindow } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

type Burst = Pick<Candidate, 'onsetSample' | 'endSample' | 'peakFrequencyHz' | 'bandLowHz' | 'bandHighHz'>;

/** Shorter windows show single samples and no picture. */
const LEAST_WINDOW_SAMPLES = 384;
/** Before the onset, and in all, in lengths of the burst: it takes about a third of the width. */
const BEFORE = 0.9;
const WIDTHS = 3;

/** The burst over about a third of the width, a little left of the middle, so that its end is seen as well. */
export function windowOf({ onsetSample, endSample }: Burst, frames: number): TimeWindow {
  const burstSamples = Math.max(1, endSample - onsetSample);
  const samples = Math.max(WIDTHS * burstSamples, LEAST_WINDOW_SAMPLES);
  const spare = samples - burstSamples;
  const before = (spare * BEFORE) / (WIDTHS - 1);
  const startSample = onsetSample - before;
  return clampWindow({ startSample, endSample: startSample + samples }, frames);
}

/** The pitch at which clicks are told apart well. */
const COMFORTABLE_HZ = 7000;

/** How high a burst lies. */
export function pitchHz({ peakFrequencyHz, bandLowHz, bandHighHz }: Burst): number {
  return peakFrequencyHz ?? Math.sqrt(Math.max(1, bandLowHz) * bandHighHz);
}

/** None for what people hear; else the least slowing that brings the burst to where they hear well. */
export function slowOf(burst: Burst): SlowFactor {
  const hz = pitchHz(burst);
  if (hz <= HEARING_LINE_HZ) return 1;
  return SLOW_FACTORS.find((factor) => hz / factor <= COMFORTABLE_HZ) ?? 100;
}

/** Long enough to be heard as something that happens in a surrounding. */
const HEARD_S = 0.7;
const BEFORE_SHARE = 0.35;

/** What is played: the burst with so much around it that it lasts as long as a blink. */
export function playSpanOf(
  { onsetSample, endSample }: Burst,
  { frames, sampleRateHz, slow }: { frames: number; sampleRateHz: number; slow: number },
): TimeWindow {
  const wanted = (HEARD_S * sampleRateHz) / slow;
  const samples = Math.round(Math.max(wanted, 1.5 * (endSample - onsetSample)));
  const startSample = Math.round(onsetSample - BEFORE_SHARE * (samples - (endSample - onsetSample)));
  return {
    startSample: Math.max(0, startSample),
    endSample: Math.min(frames, Math.max(0, startSample) + samples),
  };
}
