import type { SampleSpan } from '@shared/domain/event-span.ts';
import { formatNumber } from '@/composables/useFormat.ts';

/** "12.40 s to 15.00 s" */
export function secondsWords({ startSample, endSample }: SampleSpan, sampleRateHz: number): string {
  const at = (sample: number) =>
    `${formatNumber(sample / sampleRateHz, { minimumFractionDigits: 2, maximumFractionDigits: 2 })}\u00A0s`;
  return `${at(startSample)} to ${at(endSample)}`;
}
