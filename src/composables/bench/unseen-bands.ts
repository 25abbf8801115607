import type { Recording } from '@shared/contract/recordings.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { formatFrequency } from '@/composables/useFormat.ts';

/** Frequencies that this recording cannot show, and why, in words that stand in the picture. */
export interface UnseenBand {
  lowHz: number;
  highHz: number;
  reason: string;
}

export type BandFacts = Pick<Recording, 'sampleRateHz' | 'sensorLowHz' | 'sensorHighHz' | 'measurement'>;

/** The steep end of a converter's filter lies above this share of the sample rate. */
const USABLE_SHARE = 0.45;
/** Less than a third of an octave above the hearing line is too little to look at. */
const LEAST_TOP_HZ = HEARING_LINE_HZ * 2 ** (1 / 3);

/** The highest frequency that the picture shows. A rate that ends below the hearing line still gets its upper band. */
export function topFrequency(sampleRateHz: number): number {
  return Math.max(sampleRateHz / 2, HEARING_LINE_HZ * 1.25);
}

interface Limit {
  fromHz: number;
  usableHz: number;
  reason: string;
}

/** What ends the frequencies of a recording from above: rate, a brick-wall edge, the sensor. */
function limitsAbove({ sampleRateHz, sensorHighHz, measurement }: BandFacts): Limit[] {
  const nyquistHz = sampleRateHz / 2;
  const limits: Limit[] = [
    {
      fromHz: nyquistHz,
      usableHz: sampleRateHz * USABLE_SHARE,
      reason: `the sample rate ends at ${formatFrequency(nyquistHz)}`,
    },
  ];
  const bandwidth = measurement?.bandwidth;
  if (bandwidth?.edge === 'brick-wall')
    limits.push({
      fromHz: bandwidth.effectiveHz,
      usableHz: bandwidth.effectiveHz,
      reason: `the file holds nothing above ${formatFrequency(bandwidth.effectiveHz)}`,
    });
  if (sensorHighHz !== null)
    limits.push({
      fromHz: sensorHighHz,
      usableHz: sensorHighHz,
      reason: `the sensor's band ends at ${formatFrequency(sensorHighHz)}`,
    });
  return limits.sort((a, b) => a.fromHz - b.fromHz);
}

export function unseenBands(facts: BandFacts): UnseenBand[] {
  const topHz = topFrequency(facts.sampleRateHz);
  const found: UnseenBand[] = [];
  const [lowest] = limitsAbove(facts);
  if (lowest && lowest.fromHz < topHz) found.push(fromLimit(lowest, topHz));
  else if (lowest && lowest.usableHz < LEAST_TOP_HZ) found.push(fromLimit(lowest, topHz));
  const { sensorLowHz } = facts;
  if (sensorLowHz !== null && sensorLowHz > 0)
    found.push({
      lowHz: 0,
      highHz: Math.min(sensorLowHz, topHz),
      reason: `the sensor's band begins at ${formatFrequency(sensorLowHz)}`,
    });
  return found;
}

/** Where what is left above the hearing line is too little, all of it counts as unseen. */
function fromLimit({ fromHz, usableHz, reason }: Limit, topHz: number): UnseenBand {
  const isTooLittle = usableHz < LEAST_TOP_HZ && fromHz > HEARING_LINE_HZ;
  return { lowHz: isTooLittle ? HEARING_LINE_HZ : fromHz, highHz: topHz, reason };
}

/** The reason that stands across a whole band, where nearly nothing of it can be seen. */
export function wholeBandReason(lowHz: number, highHz: number, unseen: readonly UnseenBand[]): string | null {
  const least = 0.9 * (highHz - lowHz);
  const cover = unseen.find((band) => Math.min(band.highHz, highHz) - Math.max(band.lowHz, lowHz) >= least);
  return cover?.reason ?? null;
}
