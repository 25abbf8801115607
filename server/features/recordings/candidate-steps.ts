import type { CandidateOverview, HearingClass } from '../../../shared/contract/candidates.ts';

export interface StepGrid {
  startSample: number;
  /** Exclusive. */
  endSample: number;
  samplesPerStep: number;
  steps: number;
}

interface GridInput {
  startSample?: number | undefined;
  endSample?: number | undefined;
  /** Steps wanted; a window of fewer samples has as many steps as samples. */
  steps: number;
  frames: number;
}

/** The window, as far as it lies in the recording, in equal steps of whole samples; the last may be shorter. */
export function gridOf({ startSample = 0, endSample, steps, frames }: GridInput): StepGrid {
  const start = Math.min(startSample, frames - 1);
  const end = Math.min(Math.max(endSample ?? frames, start + 1), frames);
  const samplesPerStep = Math.max(1, Math.ceil((end - start) / steps));
  return {
    startSample: start,
    endSample: end,
    samplesPerStep,
    steps: Math.ceil((end - start) / samplesPerStep),
  };
}

interface StepCount {
  hearingClass: HearingClass;
  step: number;
  count: number;
}

/** Adds up counts that come in any order, several of the same step included. */
export function tallySteps(counts: readonly StepCount[], { steps, ...window }: StepGrid): CandidateOverview {
  const classes = { below: 0, across: 0, above: 0, unknown: 0 };
  const emptySteps = () => new Array<number>(steps).fill(0);
  const perStep = {
    below: emptySteps(),
    across: emptySteps(),
    above: emptySteps(),
    unknown: emptySteps(),
  };
  let total = 0;
  for (const { hearingClass, step, count } of counts) {
    total += count;
    classes[hearingClass] += count;
    perStep[hearingClass][step]! += count;
  }
  return { total, classes, ...window, steps: perStep };
}
