import type { Course } from '../../../shared/contract/measurement.ts';
import type { TimelineRecording } from '../../../shared/contract/timeline.ts';
import { runPieces, type PlacedSegment, type RecordingClock } from '../../../shared/domain/run-time.ts';

interface LaidRecording extends RecordingClock {
  id: string;
  fileName: string;
  frames: number;
  segments: readonly PlacedSegment[];
}

export function toTimelineRecording(
  { segments, ...recording }: LaidRecording,
  course: TimelineRecording['course'],
): TimelineRecording {
  const { id, fileName, sampleRateHz, frames, runOffsetNs } = recording;
  const pieces = runPieces(recording, frames, segments);
  return { id, fileName, sampleRateHz, frames, isPlaceKnown: runOffsetNs !== null, pieces, course };
}

/** How many of the onsets lie in each step of a course. */
export function countOnsets(
  onsets: readonly number[],
  { samplesPerStep, levelDb }: Pick<Course, 'samplesPerStep' | 'levelDb'>,
): number[] {
  const counts = levelDb.map(() => 0);
  for (const onset of onsets) {
    const step = Math.min(counts.length - 1, Math.floor(onset / samplesPerStep));
    if (step >= 0) counts[step] = (counts[step] ?? 0) + 1;
  }
  return counts;
}
