import type { Candidate, HearingClass } from '@shared/contract/candidates.ts';
import type { Recording, ToldUltrasound } from '@shared/contract/recordings.ts';
import type { Fact } from '@/components/app/fact.ts';
import { formatCount, formatNumber } from '@/composables/useFormat.ts';

export const hearingWords: Readonly<Record<HearingClass, string>> = {
  above: 'above',
  across: 'across',
  below: 'below',
  unknown: 'unknown',
};

export const hearingOptions = [
  { value: 'above', label: 'above it' },
  { value: 'across', label: 'across it' },
  { value: 'below', label: 'below it' },
  { value: 'unknown', label: 'unknown' },
] as const;

/** Two or fewer: the count of chance is an expectation, so it is rounded up. */
export function chanceBound(expected: number): string {
  return expected <= 1 ? '1 or fewer' : `${formatNumber(Math.ceil(expected))} or fewer`;
}

/** How the candidates lie to the hearing line, with what noise alone would give beside it. */
export function candidateFacts({ verdict, candidates }: ToldUltrasound): Fact[] {
  if (verdict === 'not-observable')
    return [
      { key: 'total', term: 'In the band that can be observed', value: formatNumber(candidates.total) },
    ];
  const unknown = candidates.total - candidates.above - candidates.across - candidates.below;
  return [
    { key: 'above', term: 'Above the hearing line', value: formatNumber(candidates.above) },
    { key: 'across', term: 'Across it', value: formatNumber(candidates.across) },
    { key: 'below', term: 'Below it', value: formatNumber(candidates.below) },
    ...(unknown > 0 ? [{ key: 'unknown', term: 'Unknown', value: formatNumber(unknown) }] : []),
    {
      key: 'chance',
      term: 'With energy above it by chance, whole file',
      value: chanceBound(candidates.expectedByChance),
    },
  ];
}

/** "1 204 of 100 000 candidates: above the hearing line, at least 12 dB over noise." */
export function listSentence(count: number, all: number | null, filterWords: readonly string[]): string {
  const whole = formatCount(all ?? count, 'candidate');
  if (filterWords.length === 0) return `${formatCount(count, 'candidate')}.`;
  return `${formatNumber(count)} of ${whole}: ${filterWords.join(', ')}.`;
}

const leastMarginS = 0.002;
const marginInDurations = 4;

/** Address of the bench with the candidate in its middle, and enough around it to see where it starts. */
export function benchPlace(
  recording: Pick<Recording, 'id' | 'frames' | 'sampleRateHz'>,
  { onsetSample, endSample }: Pick<Candidate, 'onsetSample' | 'endSample'>,
) {
  const durationSamples = endSample - onsetSample;
  const margin = Math.ceil(
    Math.max(leastMarginS * recording.sampleRateHz, marginInDurations * durationSamples),
  );
  const from = Math.max(0, onsetSample - margin);
  const to = Math.min(recording.frames, endSample + margin);
  return { path: `/bench/${recording.id}`, query: { from: String(from), to: String(to) } };
}
