import { seededRandom } from '../lib/seeded-random.ts';
import type { SampleSpan } from './event-span.ts';
import type { SpanSet } from './span-set.ts';
import { toSpanSet } from './span-set.ts';

export interface DrawnWindow extends SampleSpan {
  /** Which of the equal parts of the recording it was drawn in, from 0. */
  stratum: number;
}

export interface WindowPlan {
  frames: number;
  count: number;
  windowSamples: number;
}

/** A sentence that says why so many windows of this length cannot be drawn, or `null`. */
export function windowsFault({ frames, count, windowSamples }: WindowPlan): string | null {
  if (count < 1 || windowSamples < 1) return 'there is no window to draw';
  if (windowSamples <= Math.floor(frames / count)) return null;
  return 'so many windows of this length do not fit into the recording';
}

/**
 * Cuts the recording into `count` equal strata and draws one window in each, its start uniform over the places at which it
 * lies whole in its stratum. Nothing but length, number and seed goes in: windows never hang on what was found in the sound.
 * The same seed gives the same windows everywhere. Throws RangeError where they do not fit.
 * Source: stratified random sampling with one unit per stratum, Cochran (1977), Sampling Techniques, chapter 5.
 */
export function drawWindows(plan: WindowPlan, seed: number): DrawnWindow[] {
  const fault = windowsFault(plan);
  if (fault) throw new RangeError(fault);
  const { frames, count, windowSamples } = plan;
  const random = seededRandom(seed);
  return Array.from({ length: count }, (_, stratum) => {
    const from = Math.floor((stratum * frames) / count);
    const to = Math.floor(((stratum + 1) * frames) / count);
    const startSample = from + Math.floor(random() * (to - from - windowSamples + 1));
    return { startSample, endSample: startSample + windowSamples, stratum };
  });
}

/** How many windows of this length make up the share of a recording, at least one and no more than fit. */
export function countForShare({ frames, windowSamples }: Omit<WindowPlan, 'count'>, share: number): number {
  const most = Math.max(1, Math.floor(frames / windowSamples));
  return Math.min(most, Math.max(1, Math.round((share * frames) / windowSamples)));
}

/** What a pass is of: its windows, or everything. */
export function partOfPass(windows: readonly SampleSpan[] | null, frames: number): SpanSet {
  return windows === null ? [{ startSample: 0, endSample: frames }] : toSpanSet(windows);
}
