import { durationText, frequencyText, levelText } from '../../shared/audio/unit-text.ts';
import type { DetectedCandidate, FlaggedSpan, Ultrasound } from '../../shared/contract/measurement.ts';
import type { ObservableBand } from './ultrasound-band.ts';

const MOST_SPANS = 1000;
const UNLIKELY = 0.05;

/** Counts candidates by class and adds their energies, one at a time. */
export class CandidateTally {
  readonly counts = { total: 0, below: 0, across: 0, above: 0, unknown: 0 };
  #energy = 0;
  #energyAbove = 0;
  #first: DetectedCandidate | null = null;
  #strongest: DetectedCandidate | null = null;

  add(candidate: DetectedCandidate): void {
    this.counts.total += 1;
    this.counts[candidate.hearingClass] += 1;
    if (candidate.ultrasonicShare !== null) {
      this.#energy += candidate.energyFs2S;
      this.#energyAbove += candidate.energyFs2S * candidate.ultrasonicShare;
    }
    if (candidate.hearingClass !== 'across' && candidate.hearingClass !== 'above') return;
    if (!this.#first || candidate.onsetSample < this.#first.onsetSample) this.#first = candidate;
    if (!this.#strongest || (candidate.peakDb ?? -Infinity) > (this.#strongest.peakDb ?? -Infinity)) {
      this.#strongest = candidate;
    }
  }

  /** Of those with energy above 20 kHz. */
  get first(): DetectedCandidate | null {
    return this.#first;
  }

  get strongest(): DetectedCandidate | null {
    return this.#strongest;
  }

  /** Share of the energy of all bursts that lies above 20 kHz; `null` without bursts that tell. */
  get energyShare(): number | null {
    return this.#energy > 0 ? this.#energyAbove / this.#energy : null;
  }
}

/**
 * Share of a recording's energy (mean removed) that lies above 20 kHz, from mean squares of equal steps, all channels added;
 * `null` in silence.
 */
export function ultrasonicEnergyShare(
  courses: readonly { levelMeanSquares: Float64Array; ultrasonicMeanSquares: Float64Array }[],
): number | null {
  const sum = (values: Float64Array) => values.reduce((total, value) => total + value, 0);
  const whole = courses.reduce((total, course) => total + sum(course.levelMeanSquares), 0);
  const above = courses.reduce((total, course) => total + sum(course.ultrasonicMeanSquares), 0);
  return whole > 0 ? Math.min(1, above / whole) : null;
}

export interface UltrasoundFacts {
  readonly sampleRateHz: number;
  readonly band: ObservableBand;
  readonly tally: CandidateTally;
  /** What steady noise alone may give. */
  readonly expectedByChance: number;
  readonly energyShare: number | null;
  /** One per channel. */
  readonly tracked: readonly { spans: readonly FlaggedSpan[]; spanCount: number }[];
}

/**
 * The verdict on what lies above 20 kHz: not observable, found, or looked for and not found.
 *
 * Found: a span stands at least 6 dB over its floor, or there are more candidates with energy above 20 kHz than steady noise
 * would give in one recording of twenty.
 */
export function judgeUltrasound(facts: UltrasoundFacts): Ultrasound {
  const { band, tally, expectedByChance } = facts;
  const { total, below, across, above } = tally.counts;
  const candidates = { total, below, across, above, expectedByChance };
  if (!band.observable) {
    const none = { energyShare: null, burstEnergyShare: null, spanCount: 0, spans: [] };
    const unseen = { ...candidates, below: 0, across: 0, above: 0 };
    const reason = band.reason;
    return {
      verdict: 'not-observable',
      reason,
      bandLowHz: null,
      bandHighHz: null,
      ...none,
      candidates: unseen,
    };
  }
  const spanCount = facts.tracked.reduce((sum, { spanCount: count }) => sum + count, 0);
  const spans = strongestSpans(facts.tracked.flatMap((channel) => channel.spans));
  const found = spanCount > 0 || chanceOfAtLeast(across + above, expectedByChance) < UNLIKELY;
  return {
    verdict: found ? 'found' : 'not-found',
    reason: found ? foundSentence(facts, spans, spanCount) : notFoundSentence(facts, across + above),
    bandLowHz: band.lowHz,
    bandHighHz: band.highHz,
    energyShare: facts.energyShare,
    burstEnergyShare: tally.energyShare,
    spanCount,
    spans,
    candidates,
  };
}

function strongestSpans(spans: FlaggedSpan[]): FlaggedSpan[] {
  const kept = spans.sort((a, b) => b.excessDb - a.excessDb).slice(0, MOST_SPANS);
  return kept.sort((a, b) => a.startSample - b.startSample || a.channel - b.channel);
}

function foundSentence(
  { sampleRateHz, band, tally, expectedByChance }: UltrasoundFacts,
  spans: FlaggedSpan[],
  spanCount: number,
): string {
  const time = (sample: number) => durationText(sample / sampleRateHz);
  const count = tally.counts.across + tally.counts.above;
  const parts = [`Energy above 20 kHz as this sensor sees it, in the band from ${bandText(band)}.`];
  const { first, strongest } = tally;
  if (count > 0 && first && strongest) {
    const at =
      strongest.peakFrequencyHz === null
        ? ''
        : ` near ${frequencyText(Math.round(strongest.peakFrequencyHz / 100) * 100)}`;
    const peak = `${levelText(strongest.peakDb, 'dB')} re full scale`;
    parts.push(
      `${counted(count, 'candidate')}, the first at ${time(first.onsetSample)}, the strongest at ${time(strongest.onsetSample)} with a peak of ${peak}${at}; noise alone would give ${chanceText(expectedByChance)}.`,
    );
  }
  const loudest = spans.reduce<FlaggedSpan | null>(
    (most, span) => (!most || span.excessDb > most.excessDb ? span : most),
    null,
  );
  if (loudest) {
    parts.push(
      `${counted(spanCount, 'span')} at least 6 dB over the quiet floor, the strongest at ${time(loudest.startSample)} by ${levelText(loudest.excessDb, 'dB')}.`,
    );
  }
  return parts.join(' ');
}

function notFoundSentence({ band, expectedByChance }: UltrasoundFacts, count: number): string {
  const looked = `Looked for in the band from ${bandText(band)}, as this sensor sees it, and not found: no span stands 6 dB over the quiet floor`;
  if (count === 0) return `${looked}, and no candidate has energy there.`;
  return `${looked}, and ${counted(count, 'candidate')} with energy there ${count === 1 ? 'is' : 'are'} no more than noise alone would give (${chanceText(expectedByChance)}).`;
}

function bandText(band: ObservableBand): string {
  return band.observable
    ? `${frequencyText(band.lowHz)} to ${frequencyText(Math.round(band.highHz))}`
    : 'nothing';
}

function chanceText(expected: number): string {
  return expected < 0.01 ? 'fewer than 0.01' : `at most ${expected.toFixed(2)}`;
}

function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`;
}

/** Chance of n or more where a Poisson count has a mean: 1 - sum over k < n of exp(-m) m^k / k!. */
function chanceOfAtLeast(count: number, mean: number): number {
  let term = Math.exp(-mean);
  let fewer = 0;
  for (let k = 0; k < count; k++) {
    fewer += term;
    term *= mean / (k + 1);
  }
  return count === 0 ? 1 : Math.max(0, 1 - fewer);
}
