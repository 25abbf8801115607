import type { TimelineRecording } from '@shared/contract/timeline.ts';
import type { RunPiece, RunSpan } from '@shared/domain/run-time.ts';

export interface StripColumns {
  span: RunSpan;
  columns: number;
}

interface Stretch extends RunSpan {
  /** Of the step that it is cut from. */
  share: number;
}

/** A step of a course on the clock of the run: one stretch, or several where gaps lie inside. */
function stretchesOf(
  pieces: readonly RunPiece[],
  fromSample: number,
  toSample: number,
  firstPiece: number,
): Stretch[] {
  const found: Stretch[] = [];
  for (let at = firstPiece; at < pieces.length; at++) {
    const piece = pieces[at];
    if (piece === undefined || piece.startSample >= toSample) break;
    const start = Math.max(fromSample, piece.startSample);
    const end = Math.min(toSample, piece.endSample);
    if (end <= start) continue;
    const perSample = (piece.endNs - piece.startNs) / (piece.endSample - piece.startSample);
    const startNs = piece.startNs + (start - piece.startSample) * perSample;
    const share = (end - start) / (toSample - fromSample);
    found.push({ startNs, endNs: startNs + (end - start) * perSample, share });
  }
  return found;
}

/** Hands every step of the course of a recording to `visit`, cut into columns. */
function eachColumn(
  { pieces, frames, course }: TimelineRecording,
  { span, columns }: StripColumns,
  visit: (step: number, column: number, share: number) => void,
): void {
  if (course === null) return;
  const columnNs = (span.endNs - span.startNs) / columns;
  let firstPiece = 0;
  course.levelDb.forEach((_, step) => {
    const from = step * course.samplesPerStep;
    const to = Math.min(frames, from + course.samplesPerStep);
    if (to <= from) return;
    while (firstPiece < pieces.length - 1 && (pieces[firstPiece]?.endSample ?? 0) <= from) firstPiece++;
    for (const { startNs, endNs, share } of stretchesOf(pieces, from, to, firstPiece)) {
      const first = Math.max(0, Math.floor((startNs - span.startNs) / columnNs));
      const last = Math.min(columns - 1, Math.ceil((endNs - span.startNs) / columnNs) - 1);
      for (let column = first; column <= last; column++) {
        const left = span.startNs + column * columnNs;
        const overlapNs = Math.min(endNs, left + columnNs) - Math.max(startNs, left);
        if (overlapNs > 0) visit(step, column, (share * overlapNs) / (endNs - startNs));
      }
    }
  });
}

/** Events per second in equal columns of the span; `null` where nothing is counted. Steps are cut where columns end. */
export function rateColumns(recordings: readonly TimelineRecording[], grid: StripColumns): (number | null)[] {
  const columnS = (grid.span.endNs - grid.span.startNs) / grid.columns / 1e9;
  const rates: (number | null)[] = Array.from({ length: grid.columns }, () => null);
  for (const recording of recordings) {
    const counts = recording.course?.counts;
    if (!counts) continue;
    eachColumn(recording, grid, (step, column, share) => {
      rates[column] = (rates[column] ?? 0) + ((counts[step] ?? 0) * share) / columnS;
    });
  }
  return rates;
}

/** The highest level in each column, dB; `null` where nothing was recorded. */
export function levelColumns(
  recordings: readonly TimelineRecording[],
  grid: StripColumns,
): (number | null)[] {
  const levels: (number | null)[] = Array.from({ length: grid.columns }, () => null);
  for (const recording of recordings) {
    const course = recording.course?.levelDb;
    if (!course) continue;
    eachColumn(recording, grid, (step, column) => {
      const level = course[step] ?? null;
      if (level !== null) levels[column] = Math.max(levels[column] ?? level, level);
    });
  }
  return levels;
}

/** Means over `radius` columns to either side, twice, so that a rate reads as an area; what is not known stays so. */
export function smoothColumns(values: readonly (number | null)[], radius: number): (number | null)[] {
  return meanColumns(meanColumns(values, radius), radius);
}

function meanColumns(values: readonly (number | null)[], radius: number): (number | null)[] {
  return values.map((value, at) => {
    if (value === null) return null;
    const near = values.slice(Math.max(0, at - radius), at + radius + 1).filter((one) => one !== null);
    return near.reduce((sum, one) => sum + one, 0) / near.length;
  });
}
