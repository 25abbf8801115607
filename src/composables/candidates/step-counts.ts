import type { CandidateOverview, HearingClass } from '@shared/contract/candidates.ts';

type Steps = Pick<CandidateOverview, 'startSample' | 'endSample' | 'samplesPerStep' | 'steps'>;

const everyClass: readonly HearingClass[] = ['below', 'across', 'above', 'unknown'];

/** From the lowest part of a column to its highest; one class alone where a list shows no other. */
export function classesShown(hearingClass: HearingClass | null): readonly HearingClass[] {
  return hearingClass === null ? everyClass : [hearingClass];
}

/** How many of the classes shown have their onset in each step. */
export function countsOf({ steps }: Steps, classes: readonly HearingClass[]): number[] {
  return steps.below.map((_count, step) => classes.reduce((sum, name) => sum + (steps[name][step] ?? 0), 0));
}

/** As many candidates lie before a step as stand before its first row in a list by onset. */
export function rankOfStep(counts: readonly number[], step: number): number {
  return counts.slice(0, step).reduce((sum, count) => sum + count, 0);
}

export function stepOfSample(
  { startSample, samplesPerStep, steps }: Pick<Steps, 'startSample' | 'samplesPerStep' | 'steps'>,
  sample: number,
): number {
  const step = Math.floor((sample - startSample) / samplesPerStep);
  return Math.max(0, Math.min(steps.below.length - 1, step));
}
