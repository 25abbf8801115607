import type { ReleaseSnapshot, SnapshotRecording } from '../../../shared/contract/release-snapshot.ts';

/** The path of a recording's audio below `data/`: what `file_name` holds in every table. */
export function audioPath(recording: Pick<SnapshotRecording, 'fileName'>): string {
  return `audio/${recording.fileName}`;
}

export type RecordingIndex = ReadonlyMap<string, SnapshotRecording>;

export function indexRecordings(snapshot: ReleaseSnapshot): RecordingIndex {
  return new Map(snapshot.recordings.map((recording) => [recording.id, recording]));
}

export function recordingOf(index: RecordingIndex, recordingId: string): SnapshotRecording {
  const recording = index.get(recordingId);
  if (!recording) throw new Error(`The snapshot holds no recording ${recordingId}.`);
  return recording;
}
