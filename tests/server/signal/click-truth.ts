import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import type { TrueClick } from './synthetic-clicks.ts';

export interface Score {
  readonly recall: number;
  readonly precision: number;
  readonly medianErrorUs: number;
  readonly missed: readonly TrueClick[];
}

const LONGEST_ERROR_S = 0.001;

/** Each click takes the nearest candidate not yet taken within 1 ms, or within half its distance to the next click. */
export function compareWithTruth(
  found: readonly Pick<DetectedCandidate, 'onsetSample'>[],
  clicks: readonly TrueClick[],
  sampleRateHz: number,
): Score {
  const taken = new Set<number>();
  const errors: number[] = [];
  const missed = clicks.filter((click, at) => {
    const apart = Math.min(
      click.onset - (clicks[at - 1]?.onset ?? -Infinity),
      (clicks[at + 1]?.onset ?? Infinity) - click.onset,
    );
    const reach = Math.min(LONGEST_ERROR_S * sampleRateHz, apart / 2);
    let best = -1;
    let least = reach;
    for (const [index, { onsetSample }] of found.entries()) {
      const error = Math.abs(onsetSample - click.onset);
      if (taken.has(index) || error > least) continue;
      least = error;
      best = index;
    }
    if (best < 0) return true;
    taken.add(best);
    errors.push((least / sampleRateHz) * 1e6);
    return false;
  });
  errors.sort((a, b) => a - b);
  return {
    recall: errors.length / clicks.length,
    precision: found.length > 0 ? errors.length / found.length : 1,
    medianErrorUs: errors[errors.length >> 1] ?? NaN,
    missed,
  };
}
