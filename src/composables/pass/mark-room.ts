import type { SampleSpan } from '@shared/domain/event-span.ts';
import { holdsSample } from '@shared/domain/span-set.ts';

/** Where marks may begin; the server holds the same rule and refuses the rest. */
export interface MarkRoom {
  isOutside: (sample: number) => boolean;
  /** Within what a start that stands here can be moved: its own window, or the whole recording. */
  around: (sample: number) => SampleSpan;
}

export const OUTSIDE_WORDS = 'Outside the windows of this pass: no mark begins here';

/** A pass of windows has marks that begin inside of them; how far they reach does not matter. */
export function markRoom(windows: readonly SampleSpan[] | null, frames: number): MarkRoom {
  const whole = { startSample: 0, endSample: frames };
  return {
    isOutside: (sample) => windows !== null && !holdsSample(windows, Math.round(sample)),
    around: (sample) => windows?.find((one) => holdsSample([one], sample)) ?? whole,
  };
}
