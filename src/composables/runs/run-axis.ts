import type { TimelineRecording } from '@shared/contract/timeline.ts';
import { spanOfAll, type RunSpan } from '@shared/domain/run-time.ts';

export function pixelAtRunTime(ns: number, { startNs, endNs }: RunSpan, widthPx: number): number {
  return ((ns - startNs) / Math.max(1, endNs - startNs)) * widthPx;
}

export function runTimeAtPixel(pixel: number, { startNs, endNs }: RunSpan, widthPx: number): number {
  return startNs + (pixel / Math.max(1, widthPx)) * (endNs - startNs);
}

export function spanOfRecording({ pieces }: Pick<TimelineRecording, 'pieces'>): RunSpan | null {
  return spanOfAll(pieces);
}

/** What the strip of a run shows: every recording and every phase; a second where there is nothing. */
export function stripSpan(
  recordings: readonly Pick<TimelineRecording, 'pieces'>[],
  phases: readonly RunSpan[],
): RunSpan {
  const spans = [...recordings.map(spanOfRecording).filter((span) => span !== null), ...phases];
  return spanOfAll(spans) ?? { startNs: 0, endNs: 1e9 };
}

/** A sentence for each thing about the places of the recordings that a person has to know. */
export function placeNote(recordings: readonly Pick<TimelineRecording, 'isPlaceKnown'>[]): string {
  const unknown = recordings.filter(({ isPlaceKnown }) => !isPlaceKnown).length;
  if (unknown === 0) return '';
  if (recordings.length === 1)
    return 'Place in the run not known: the start of the recording stands for the zero of the run.';
  return `Place in the run not known of ${unknown} of ${recordings.length} recordings: they are drawn from zero on.`;
}
