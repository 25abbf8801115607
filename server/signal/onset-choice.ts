import type { ActiveRegion } from './active-region.ts';
import type { OnsetFound } from './onset-search.ts';

const PERIODS_APART = 3;
const ECHO_SHARE = 0.2;
/** A damped sine is still heard so many decay times after its onset. */
const RING_DECAYS = 4;

/** One burst as several octaves saw it. */
export interface ChosenOnset extends OnsetFound {
  /** All octaves that saw it. */
  readonly seenLowHz: number;
  readonly seenHighHz: number;
  /** Whether it rests on damped sines alone: nowhere would the energy have been enough. */
  readonly onSineAlone: boolean;
}

/**
 * One onset per burst from the onsets of all octaves: the one with most evidence speaks, and those near it join.
 *
 * "Near" is the shortest separation or three periods of the lower of the two bands, whichever is longer: a band cannot
 * place an onset better than its periods. What another octave hears of a far stronger burst joins it too, wherever it puts
 * the onset, and so does a damped sine inside a stronger burst's ringing.
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
        Math.abs(lead.sample - onset.sample) < reach(lead, onset, separationSamples, sampleRateHz) ||
        isEchoOf(onset, lead) ||
        isInRinging(onset, lead),
    );
    if (near) near.joined.push(onset);
    else chosen.push({ lead: onset, joined: [] });
  }
  return chosen.map(({ lead, joined }) => describe(lead, joined)).sort((a, b) => a.sample - b.sample);
}

function reach(lead: OnsetFound, other: OnsetFound, separationSamples: number, sampleRateHz: number): number {
  return Math.max(separationSamples, (PERIODS_APART * sampleRateHz) / Math.min(lead.lowHz, other.lowHz));
}

/** The strong onsets of the last time, of all octaves: where they are known, damped sines that only join them need no exact place. */
export class StrongOnsets {
  readonly #memorySamples: number;
  #onsets: OnsetFound[] = [];

  constructor(memorySamples: number) {
    this.#memorySamples = memorySamples;
  }

  add(found: readonly OnsetFound[]): void {
    this.#onsets.push(...found);
  }

  forgetBefore(sample: number): void {
    this.#onsets = this.#onsets.filter(({ endSample }) => endSample > sample - this.#memorySamples);
  }

  /** What a region adds to a far stronger onset inside its best window, where there is one: it is what another octave hears of that. */
  echoIn(region: ActiveRegion): OnsetFound | null {
    const { evidence, bestStartSample, bestEndSample } = region;
    const lead = this.#onsets.find(
      ({ sample, evidence: ofLead }) =>
        evidence < ECHO_SHARE * ofLead && sample >= bestStartSample && sample < bestEndSample,
    );
    if (!lead) return null;
    const { lowHz, highHz, startSample, endSample } = region;
    return {
      sample: lead.sample,
      uncertaintySamples: lead.uncertaintySamples,
      ...{ evidence, lowHz, highHz, startSample, endSample, bestStartSample, bestEndSample },
      rise: 0,
      isStep: false,
      sine: null,
    };
  }

  /** Whether a damped sine found by itself will join a stronger onset, wherever in a stretch it begins. */
  joins(sine: { fromSample: number; toSample: number; evidence: number; decaySamples: number }): boolean {
    return this.#onsets.some(
      (lead) =>
        sine.evidence < ECHO_SHARE * lead.evidence &&
        sine.fromSample >= lead.sample - RING_DECAYS * sine.decaySamples &&
        sine.toSample < lead.endSample,
    );
  }
}

/** Whether a region is what another octave hears of a far stronger burst, whose onset lies in its best window. */
function isEchoOf(onset: OnsetFound, lead: OnsetFound): boolean {
  if (onset.evidence >= ECHO_SHARE * lead.evidence) return false;
  if (!onset.sine?.alone) return lead.sample >= onset.bestStartSample && lead.sample < onset.bestEndSample;
  return onset.sample >= ringingBegin(onset, lead) && onset.sample < lead.endSample;
}

/** Whether it is what goes on of a stronger burst in the same band, rather than a step in it. */
function isInRinging(onset: OnsetFound, lead: OnsetFound): boolean {
  if (onset.lowHz >= lead.highHz || onset.highHz <= lead.lowHz) return false;
  // What was there before a sine is told over one decay time: within it the stronger burst may be the same.
  const apart = onset.sine?.alone ? onset.sine.decaySamples : 0;
  if (onset.sample > lead.sample + apart && onset.isStep) return false;
  const end = lead.sine ? lead.sample + RING_DECAYS * lead.sine.decaySamples : lead.endSample;
  return onset.sample >= ringingBegin(onset, lead) && onset.sample < end;
}

/** A sine that leads into a stronger burst is what a window that ends in it has of that. */
function ringingBegin(onset: OnsetFound, lead: OnsetFound): number {
  return onset.sine?.alone ? lead.sample - RING_DECAYS * onset.sine.decaySamples : lead.sample;
}

function describe(lead: OnsetFound, joined: readonly OnsetFound[]): ChosenOnset {
  const all = [lead, ...joined];
  return {
    ...lead,
    seenLowHz: Math.min(...all.map(({ lowHz }) => lowHz)),
    seenHighHz: Math.max(...all.map(({ highHz }) => highHz)),
    onSineAlone: all.every(({ sine }) => sine?.alone),
    endSample: Math.max(...all.map(({ endSample }) => endSample)),
  };
}
