import { clampSpan } from '@shared/domain/event-span.ts';
import type { SampleSpan } from '@shared/domain/event-span.ts';
import type { Confidence } from '@shared/contract/schemes.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';

export type Edge = 'start' | 'end';
/** An edge, or the mark as a whole. */
export type MarkPart = Edge | 'whole';

/** The span with one part of it moved; it stays inside the recording, begins inside `room` and keeps at least a sample. */
export function movedSpan(
  span: SampleSpan,
  part: MarkPart,
  samples: number,
  frames: number,
  room: SampleSpan = wholeOf(frames),
): SampleSpan {
  const { startSample, endSample } = span;
  if (part === 'start') {
    const latest = Math.min(endSample, room.endSample) - 1;
    const moved = Math.max(room.startSample, Math.min(startSample + samples, latest));
    return clampSpan({ startSample: moved, endSample }, frames);
  }
  if (part === 'end')
    return clampSpan({ startSample, endSample: Math.max(endSample + samples, startSample + 1) }, frames);
  const shift = fittedShift([span], samples, frames, () => room);
  return { startSample: startSample + shift, endSample: endSample + shift };
}

/**
 * How far all of these spans can be moved together without one leaving the recording, or beginning outside of the room
 * around its start; whole samples.
 */
export function fittedShift(
  spans: readonly SampleSpan[],
  samples: number,
  frames: number,
  roomAround: (startSample: number) => SampleSpan = () => wholeOf(frames),
): number {
  const least = { before: Infinity, after: Infinity };
  for (const { startSample, endSample } of spans) {
    const room = roomAround(startSample);
    least.before = Math.min(least.before, startSample - room.startSample);
    least.after = Math.min(least.after, frames - endSample, room.endSample - 1 - startSample);
  }
  if (spans.length === 0) return 0;
  return Math.max(-Math.max(0, least.before), Math.min(Math.max(0, least.after), Math.round(samples)));
}

function wholeOf(frames: number): SampleSpan {
  return { startSample: 0, endSample: frames };
}

/** Two marks of one, parted before this sample; `null` where it lies on an edge or outside. */
export function splitMark<Fields extends MarkFields>(
  mark: Fields,
  atSample: number,
): readonly [Fields, Fields] | null {
  const at = Math.round(atSample);
  if (at <= mark.startSample || at >= mark.endSample) return null;
  const later = { origin: 'hand' as const, candidateId: null, rawStartSample: null };
  return [
    { ...mark, endSample: at },
    { ...mark, ...later, startSample: at },
  ];
}

const CERTAINTY: readonly Confidence[] = ['unsure', 'probable', 'sure'];

/** A sentence that says why these cannot become one mark, or `null`. */
export function mergeFault(marks: readonly MarkFields[]): string | null {
  if (marks.length < 2) return 'Select at least two marks to make one of them';
  if (new Set(marks.map(({ channel }) => channel)).size > 1)
    return 'Marks of different channels cannot become one';
  return null;
}

/**
 * One mark over all of these, by time: it begins like the first and ends with the last. Class and origin are those of the
 * first, confidence is that of the least sure; a band stays where all have one; notes stand one after another.
 */
export function mergeMarks(marks: readonly MarkFields[]): MarkFields | null {
  const [first, ...rest] = [...marks].sort(
    (a, b) => a.startSample - b.startSample || a.endSample - b.endSample,
  );
  if (!first || rest.length === 0) return null;
  const all = [first, ...rest];
  const notes = [...new Set(all.map(({ note }) => note.trim()).filter((note) => note !== ''))];
  return {
    ...first,
    endSample: Math.max(...all.map(({ endSample }) => endSample)),
    lowHz: edgeOf(
      all.map(({ lowHz }) => lowHz),
      Math.min,
    ),
    highHz: edgeOf(
      all.map(({ highHz }) => highHz),
      Math.max,
    ),
    confidence: CERTAINTY.find((word) => all.some(({ confidence }) => confidence === word)) ?? 'unsure',
    note: notes.join('; ').slice(0, 2000),
  };
}

function edgeOf(edges: readonly (number | null)[], choose: (...values: number[]) => number): number | null {
  const known = edges.filter((edge) => edge !== null);
  return known.length === edges.length ? choose(...known) : null;
}
