import type { Recording } from '@shared/contract/recordings.ts';
import type { HeldRecording } from '@shared/contract/reviews.ts';
import type { Fact } from '@/components/app/fact.ts';
import { formatBytes, formatDateTime, formatDuration, formatSampleRate } from '@/composables/useFormat.ts';

/** What a reviewer has to know about a held recording beside its findings. */
export function heldFacts(held: HeldRecording, recording: Recording | undefined): Fact[] {
  return [
    { key: 'run', term: 'Run', value: held.runTitle, isWords: true },
    { key: 'lab', term: 'Lab', value: held.labName, isWords: true },
    {
      key: 'person',
      term: 'Brought in by',
      value: held.uploadedByMe ? 'you' : (held.uploadedByName ?? 'somebody who left'),
      isWords: true,
    },
    { key: 'held', term: 'Held since', value: formatDateTime(held.heldAt) },
    ...(recording ? recordingFacts(recording) : []),
  ];
}

function recordingFacts(recording: Recording): Fact[] {
  const { material, durationS, sampleRateHz, sizeBytes, licence, note, sensorName } = recording;
  return [
    { key: 'material', term: 'Material', value: material, isWords: true },
    { key: 'sensor', term: 'Sensor', value: sensorName, isWords: true },
    { key: 'length', term: 'Length', value: formatDuration(durationS) },
    { key: 'rate', term: 'Sample rate', value: formatSampleRate(sampleRateHz) },
    { key: 'size', term: 'Size', value: formatBytes(sizeBytes) },
    { key: 'licence', term: 'Licence, once shared', value: licence },
    ...(note ? [{ key: 'note', term: 'Note of the contributor', value: note, isWords: true }] : []),
  ];
}
