import { durationText, frequencyText, levelText } from '../../shared/audio/unit-text.ts';
import type { DetectedCandidate, FlaggedSpan, Ultrasound } from '../../shared/contract/measurement.ts';
import { LOWEST_JUDGED_HZ } from './bursts.ts';
import { HEARING_LINE_HZ } from './hearing-line.ts';
import { DENSITY_FLOOR_DB } from './long-term-spectrum.ts';
import { seesBelowHearingLine, type ObservableBand } from './ultrasound-band.ts';

const MOST_SPANS = 1000;
const UNLIKELY = 0.05;

/** Counts candidates by class and adds their energies, one at a time. */
export class CandidateTally {
  readonly counts = { total: 0, below: 0, across: 0, above: 0, unknown: 0 };
  #energy = 0;
  #energyAbove = 0;
  readonly #seesBelow: boolean;
  #ultrasonic = 0;
  #first: DetectedCandidate | null = null;
  #strongest: DetectedCandidate | null = null;

  /** @param sensorLowHz where the sensor's band begins; `null` where nobody stated it. */
  constructor(sensorLowHz: number | null) {
    this.#seesBelow = seesBelowHearingLine(sensorLowHz);
  }

  add(candidate: DetectedCandidate): void {
    this.counts.total += 1;
    this.counts[candidate.hearingClass] += 1;
    if (candidate.ultrasonicShare !== null) {
      this.#energy += candidate.energyFs2S;
      this.#energyAbove += candidate.energyFs2S * candidate.ultrasonicShare;
    }
    if (!this.#hasUltrasound(candidate)) return;
    this.#ultrasonic += 1;
    if (!this.#first || candidate.onsetSample < this.#first.onsetSample) this.#first = candidate;
    if (!this.#strongest || (candidate.peakDb ?? -Infinity) > (this.#strongest.peakDb ?? -Infinity)) {
      this.#strongest = candidate;
    }
  }

  /** How many have energy above 20 kHz. */
  get ultrasonic(): number {
    return this.#ultrasonic;
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

  /** By its class; or, where the sensor sees nothing below the hearing line, by the band in which it stood out. */
  #hasUltrasound({ hearingClass, bandHighHz }: DetectedCandidate): boolean {
    if (!this.#seesBelow) return bandHighHz > HEARING_LINE_HZ;
    return hearingClass === 'across' || hearingClass === 'above';
  }
}

/**
 * Share of the energy in the band that sensor and rate can see that lies above 20 kHz, by the mean spectra of all channels:
 * what is slower than a long frame is left out. `null` in silence, and where the band begins too near to 20 kHz to tell.
 */
export function ultrasonicEnergyShare(
  spectra: readonly { frequenciesHz: readonly number[]; meanDbPerHz: readonly number[] }[],
  sensorLowHz: number | null,
  highHz: number,
): number | null {
  if (!seesBelowHearingLine(sensorLowHz)) return null;
  let below = 0;
  let above = 0;
  for (const { frequenciesHz, meanDbPerHz } of spectra) {
    for (const [point, hz] of frequenciesHz.entries()) {
      if (hz < (sensorLowHz ?? 0) || hz > highHz || meanDbPerHz[point]! <= DENSITY_FLOOR_DB) continue;
      const power = 10 ** (meanDbPerHz[point]! / 10);
      if (hz < HEARING_LINE_HZ) below += power;
      else above += power;
    }
  }
  return below + above > 0 ? above / (below + above) : null;
}

export interface UltrasoundFacts {
  readonly sampleRateHz: number;
  /** Where the sensor's band begins; `null` where nobody stated it. */
  readonly sensorLowHz: number | null;
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
  const found = spanCount > 0 || chanceOfAtLeast(tally.ultrasonic, expectedByChance) < UNLIKELY;
  return {
    verdict: found ? 'found' : 'not-found',
    reason: `${found ? foundSentence(facts, spans, spanCount) : notFoundSentence(facts)}${sensorSentence(facts)}`,
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
  const count = tally.ultrasonic;
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

function notFoundSentence({ band, tally, expectedByChance }: UltrasoundFacts): string {
  const count = tally.ultrasonic;
  const looked = `Looked for in the band from ${bandText(band)}, as this sensor sees it, and not found: no span stands 6 dB over the quiet floor`;
  if (count === 0) return `${looked}, and no candidate has energy there.`;
  return `${looked}, and ${counted(count, 'candidate')} with energy there ${count === 1 ? 'is' : 'are'} no more than noise alone would give (${chanceText(expectedByChance)}).`;
}

/** What the beginning of the sensor's band means for shares and classes; empty where it is below all that is judged. */
function sensorSentence({ sensorLowHz, tally }: UltrasoundFacts): string {
  if (sensorLowHz === null || tally.counts.total === 0) return '';
  const begins = frequencyText(sensorLowHz);
  if (!seesBelowHearingLine(sensorLowHz)) {
    return ` The band of this sensor begins at ${begins}: what a burst has below 20 kHz is not seen, so that no candidate can be placed below, across or above the hearing line.`;
  }
  if (sensorLowHz <= LOWEST_JUDGED_HZ) return '';
  return ` Shares and classes are of what lies above ${begins}, where the band of this sensor begins.`;
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
