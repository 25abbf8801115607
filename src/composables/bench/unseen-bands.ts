import type { Recording } from '@shared/contract/recordings.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { formatFrequency } from '@/composables/useFormat.ts';

/** Frequencies that this recording cannot show, and why, in words that stand in the picture. */
export interface UnseenBand {
  lowHz: number;
  highHz: number;
  reason: string;
}

type Facts = Pick<Recording, 'sampleRateHz' | 'sensorLowHz' | 'sensorHighHz' | 'measurement'>;

/** The highest frequency that the picture shows. A rate that ends below the hearing line still gets its upper band. */
export function topFrequency(sampleRateHz: number): number {
  return Math.max(sampleRateHz / 2, HEARING_LINE_HZ * 1.25);
}

export function unseenBands(facts: Facts): UnseenBand[] {
  const topHz = topFrequency(facts.sampleRateHz);
  const nyquistHz = facts.sampleRateHz / 2;
  const { sensorLowHz, sensorHighHz } = facts;
  const bandwidth = facts.measurement?.bandwidth;
  const found: UnseenBand[] = [];
  if (nyquistHz < topHz)
    found.push({
      lowHz: nyquistHz,
      highHz: topHz,
      reason: `sample rate ends at ${formatFrequency(nyquistHz)}`,
    });
  if (bandwidth?.edge === 'brick-wall' && bandwidth.effectiveHz < nyquistHz)
    found.push({
      lowHz: bandwidth.effectiveHz,
      highHz: nyquistHz,
      reason: `nothing survives above ${formatFrequency(bandwidth.effectiveHz)} in this file`,
    });
  if (sensorHighHz !== null && sensorHighHz < nyquistHz)
    found.push({
      lowHz: sensorHighHz,
      highHz: nyquistHz,
      reason: `above the sensor's band, which ends at ${formatFrequency(sensorHighHz)}`,
    });
  if (sensorLowHz !== null && sensorLowHz > 0)
    found.push({
      lowHz: 0,
      highHz: Math.min(sensorLowHz, nyquistHz),
      reason: `below the sensor's band, which begins at ${formatFrequency(sensorLowHz)}`,
    });
  return found;
}

/** The reason that stands across a whole band, where nearly nothing of it can be seen. */
export function wholeBandReason(lowHz: number, highHz: number, unseen: readonly UnseenBand[]): string | null {
  const least = 0.9 * (highHz - lowHz);
  const cover = unseen.find((band) => Math.min(band.highHz, highHz) - Math.max(band.lowHz, lowHz) >= least);
  return cover?.reason ?? null;
}
