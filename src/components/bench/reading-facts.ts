import type { BurstParameters } from '@shared/contract/measurement.ts';
import type { Fact } from '@/components/app/fact.ts';
import { timeWords } from '@/composables/bench/mark-words.ts';
import {
  formatDecibels,
  formatDuration,
  formatFrequency,
  formatNumber,
  formatShare,
} from '@/composables/useFormat.ts';

/** A share above the hearing line that is worth a warm light. */
const GLOWING_SHARE = 0.9;

/** 71.4 dB(AE) where volts are known, else dB re full scale. */
export function peakWords({ peakDb, peakDbAe }: BurstParameters): string {
  return peakDbAe === null ? formatDecibels(peakDb) : formatDecibels(peakDbAe, 'dB(AE)');
}

/** The terms keep the meaning they have in ASTM E1316 and ISO 12716. */
export function readingFacts(parameters: BurstParameters, sampleRateHz: number): Fact[] {
  const { onsetUncertaintyUs, durationUs, riseTimeUs, ultrasonicShare } = parameters;
  const uncertainty =
    onsetUncertaintyUs === null
      ? []
      : [
          {
            key: 'uncertainty',
            term: 'Uncertainty',
            value: `\u00B1${formatDuration(onsetUncertaintyUs * 1e-6, 2)}`,
          },
        ];
  return [
    { key: 'onset', term: 'Onset', value: timeWords(parameters.onsetSample, sampleRateHz) },
    ...uncertainty,
    { key: 'duration', term: 'Duration', value: formatDuration(durationUs * 1e-6) },
    {
      key: 'rise',
      term: 'Rise time',
      value: riseTimeUs === 0 ? '0\u00A0\u00B5s' : formatDuration(riseTimeUs * 1e-6),
    },
    { key: 'counts', term: 'Counts', value: formatNumber(parameters.counts) },
    {
      key: 'peak',
      term: 'Peak',
      value: peakWords(parameters),
      title: 're full scale, or re 1 \u00B5V at the sensor where volts are known',
    },
    { key: 'frequency', term: 'Peak frequency', value: formatFrequency(parameters.peakFrequencyHz) },
    {
      key: 'share',
      term: 'Above 20 kHz',
      value: formatShare(ultrasonicShare),
      title: 'Share of the energy over the noise, as this sensor sees it',
      isGlowing: ultrasonicShare !== null && ultrasonicShare >= GLOWING_SHARE,
    },
  ];
}
