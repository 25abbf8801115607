import type { Candidate } from '@shared/contract/candidates.ts';
import { clampSpan } from '@shared/domain/event-span.ts';
import type { SampleSpan } from '@shared/domain/event-span.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';

/** A span drawn in the picture, before it has a class. */
export interface DraftSpan extends SampleSpan {
  lowHz: number | null;
  highHz: number | null;
}

export interface MarkPlace {
  channel: number;
  frames: number;
  sampleRateHz: number;
}

const LEAST_SAMPLES = 8;
const LONGEST_S = 0.02;
const WIDTH_PX = 8;

/** As short as can be seen at this zoom: eight pixels, between eight samples and 20 ms. */
export function defaultSpan(
  atSample: number,
  window: TimeWindow,
  view: { widthPx: number; frames: number; sampleRateHz: number },
): SampleSpan {
  const seen = (windowSamples(window) * WIDTH_PX) / Math.max(1, view.widthPx);
  const samples = Math.round(Math.min(Math.max(seen, LEAST_SAMPLES), LONGEST_S * view.sampleRateHz));
  const startSample = Math.floor(atSample);
  return clampSpan({ startSample, endSample: startSample + Math.max(1, samples) }, view.frames);
}

/** How a mark came about, beside what it says. */
export type Told = Pick<MarkFields, 'rawStartSample' | 'uncertaintySamples' | 'aids' | 'view'>;

const UNTOLD: Told = { rawStartSample: null, uncertaintySamples: null, aids: null, view: null };

type Named = Pick<MarkFields, 'classKey' | 'confidence'>;

export function markBySpan(span: DraftSpan, place: MarkPlace, named: Named, told = UNTOLD): MarkFields {
  const fitted = clampSpan(span, place.frames);
  const { lowHz, highHz } = span;
  return {
    ...fitted,
    lowHz,
    highHz,
    channel: place.channel,
    ...named,
    note: '',
    origin: 'hand',
    candidateId: null,
    ...told,
  };
}

/** Span, channel and uncertainty are the detector's; the class is the person's. */
export function markByCandidate(
  candidate: Candidate,
  place: MarkPlace,
  named: Named,
  told = UNTOLD,
): MarkFields {
  const { onsetUncertaintyUs } = candidate;
  const span = clampSpan(
    { startSample: candidate.onsetSample, endSample: candidate.endSample },
    place.frames,
  );
  return {
    ...span,
    lowHz: null,
    highHz: null,
    channel: candidate.channel,
    ...named,
    note: '',
    origin: 'candidate',
    candidateId: candidate.id,
    ...told,
    uncertaintySamples: onsetUncertaintyUs === null ? null : onsetUncertaintyUs * 1e-6 * place.sampleRateHz,
  };
}
