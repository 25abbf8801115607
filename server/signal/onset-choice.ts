import type { OnsetFound } from './onset-search.ts';

const PERIODS_APART = 3;

/** One burst as several octaves saw it. */
export interface ChosenOnset extends OnsetFound {
  /** All octaves that saw it. */
  readonly seenLowHz: number;
  readonly seenHighHz: number;
  readonly endSample: number;
}

/**
 * One onset per burst from the onsets of all octaves: the one with most evidence speaks, and those near it join.
 *
 * "Near" is the shortest separation or three periods of the lower of the two bands, whichever is longer: a band cannot
 * place an onset better than its periods.
 *
 * @param found any order.
 * @returns by rising onset.
 */
export function chooseOnsets(
  found: readonly OnsetFound[],
  separationSamples: number,
  sampleRateHz: number,
): ChosenOnset[] {
  const chosen: { lead: OnsetFound; joined: OnsetFound[] }[] = [];
  for (const onset of [...found].sort(
    (a, b) => b.evidence - a.evidence || b.rise - a.rise || a.sample - b.sample,
  )) {
    const near = chosen.find(
      ({ lead }) =>
        Math.abs(lead.sample - onset.sample) < reach(lead, onset, separationSamples, sampleRateHz),
    );
    if (near) near.joined.push(onset);
    else chosen.push({ lead: onset, joined: [] });
  }
  return chosen.map(({ lead, joined }) => describe(lead, joined)).sort((a, b) => a.sample - b.sample);
}

function reach(lead: OnsetFound, other: OnsetFound, separationSamples: number, sampleRateHz: number): number {
  return Math.max(separationSamples, (PERIODS_APART * sampleRateHz) / Math.min(lead.lowHz, other.lowHz));
}

function describe(lead: OnsetFound, joined: readonly OnsetFound[]): ChosenOnset {
  const all = [lead, ...joined];
  return {
    ...lead,
    seenLowHz: Math.min(...all.map(({ lowHz }) => lowHz)),
    seenHighHz: Math.max(...all.map(({ highHz }) => highHz)),
    endSample: Math.max(...all.map(({ regionEndSample }) => regionEndSample)),
  };
}
