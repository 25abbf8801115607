import type { PassWindow } from '@shared/contract/passes.ts';
import type { CoveredSpan } from '@shared/domain/coverage-rule.ts';
import type { SampleSpan } from '@shared/domain/event-span.ts';
import type { SpanSet } from '@shared/domain/span-set.ts';
import { samplesIn } from '@shared/domain/span-set.ts';

/**
 * Where to look next: what is left in the channel shown, from `sample` on and then from the start, before any other channel.
 */
export function nextUnseen(
  left: readonly CoveredSpan[],
  channel: number,
  sample: number,
): CoveredSpan | undefined {
  const here = left.filter((span) => span.channel === channel);
  const ahead = here.find(({ endSample }) => endSample > sample);
  if (ahead) return { ...ahead, startSample: Math.max(ahead.startSample, Math.floor(sample)) };
  return here[0] ?? left[0];
}

/** The window after, or before, the one in which the sample lies; from the last on to the first. */
export function neighbourWindow(
  windows: readonly PassWindow[],
  sample: number,
  direction: 1 | -1,
): PassWindow | undefined {
  if (direction > 0) return windows.find(({ startSample }) => startSample > sample) ?? windows[0];
  return windows.findLast(({ endSample }) => endSample <= sample) ?? windows.at(-1);
}

/** "12 windows of 30 s, 10 % of the recording" */
export function windowsWords(
  { count, lengthS, share }: { count: number; lengthS: number; share: number },
  formatLength: (seconds: number) => string,
): string {
  const windows = count === 1 ? '1 window' : `${count} windows`;
  return `${windows} of ${formatLength(lengthS)}, ${percentWords(share)} of the recording`;
}

/** Never "100 %" while something is left, never "0 %" once something is there. */
export function percentWords(share: number): string {
  const percent = share * 100;
  if (percent > 99 && share < 1) return '99 %';
  if (percent > 0 && percent < 1) return '1 %';
  return `${Math.round(percent)} %`;
}

/** The same for the ribbon and the sheet: "82 % seen, 14 % heard". */
export function coverageWords({ seenShare, heardShare }: { seenShare: number; heardShare: number }): string {
  return `${percentWords(seenShare)} seen, ${percentWords(heardShare)} heard`;
}

export function shareOfPart(part: SpanSet, frames: number): number {
  return samplesIn(part) / frames;
}

/** A stretch of the span that begins with it and can be looked at in one screen. */
export function firstScreen(span: SampleSpan, mostSamples: number): SampleSpan {
  const samples = Math.min(span.endSample - span.startSample, Math.floor(mostSamples));
  return { startSample: span.startSample, endSample: span.startSample + samples };
}
