import { CAMERA_CODECS } from '@shared/audio/camera-codec.ts';
import type { Recording, Sensitivity } from '@shared/contract/recordings.ts';
import type { Fact } from '@/components/app/fact.ts';
import { cameraFacts } from '@/components/recordings/camera-words.ts';
import { formatOfFile, lengthAndSize } from '@/components/recordings/format-words.ts';
import { sensorKindWords } from '@/components/recordings/recording-words.ts';
import { formatBand, formatChain } from '@/components/sensors/sensor-words.ts';
import {
  formatCount,
  formatDateTime,
  formatFrequency,
  formatHash,
  formatNumber,
  formatSampleRate,
  formatSeconds,
  formatUtc,
} from '@/composables/useFormat.ts';

/** What the file is and how it was recorded. */
export function fileFacts(recording: Recording): Fact[] {
  const { format, measurement, timeExpansion, runOffsetNs, camera } = recording;
  return [
    { key: 'format', term: 'Format', value: formatOfFile(format) },
    ...(camera && CAMERA_CODECS[camera.codec].isLossy
      ? [
          {
            key: 'lossy',
            term: 'Compressed with loss before',
            value: CAMERA_CODECS[camera.codec].name,
            isGlowing: true,
          },
        ]
      : []),
    { key: 'rate', term: 'Sample rate', value: formatSampleRate(recording.sampleRateHz) },
    { key: 'length', term: 'Length', value: lengthAndSize(recording.durationS, recording.sizeBytes) },
    ...capturesOf(recording),
    ...(timeExpansion === 1
      ? []
      : [{ key: 'expansion', term: 'Time expansion taken out', value: formatNumber(timeExpansion) }]),
    {
      key: 'bandwidth',
      term: 'Effective bandwidth',
      value: formatFrequency(measurement?.bandwidth.effectiveHz),
      isGlowing: measurement?.bandwidth.edge === 'brick-wall',
      ...(measurement ? { title: measurement.bandwidth.reason } : {}),
    },
    { key: 'sensor', term: 'Sensor', value: sensorOf(recording), isWords: true },
    {
      key: 'band',
      term: 'Sensor band',
      value: formatBand(recording.sensorLowHz, recording.sensorHighHz),
    },
    { key: 'chain', term: 'Full scale', value: formatChain(recording) },
    ...(runOffsetNs === null
      ? []
      : [{ key: 'offset', term: 'Start on the run clock', value: formatSeconds(runOffsetNs / 1e9, 3) }]),
    { key: 'sha256', term: 'sha256', value: formatHash(recording.sha256), title: recording.sha256 },
  ];
}

function capturesOf({ captures }: Recording): Fact[] {
  if (captures === null) return [];
  const { segments, liveTimeNs } = captures;
  const live = liveTimeNs === null ? '' : `, a trigger was waited for ${formatSeconds(liveTimeNs / 1e9, 3)}`;
  return [{ key: 'captures', term: 'Captures', value: `${formatCount(segments, 'segment')}${live}` }];
}

function sensorOf({ sensorName, sensorKind }: Recording): string {
  return `${sensorName}, ${sensorKindWords[sensorKind]}`;
}

/** Who brought it in, when, and what others may do with it. */
export function provenanceFacts(recording: Recording): Fact[] {
  const { measurement, sensitivity, camera } = recording;
  return [
    ...(camera ? cameraFacts(camera) : []),
    { key: 'by', term: 'Brought in by', value: recording.uploadedByName ?? 'not told', isWords: true },
    {
      key: 'at',
      term: 'Brought in',
      value: formatDateTime(recording.createdAt),
      title: formatUtc(recording.createdAt),
    },
    { key: 'licence', term: 'Licence', value: recording.licence },
    {
      key: 'sensitivity',
      term: 'Declared as sensitive',
      value:
        sensitivity.length > 0 ? sensitivity.map((kind) => sensitivityWords[kind]).join(', ') : 'nothing',
      isWords: true,
      isGlowing: sensitivity.length > 0,
    },
    ...(measurement ? [{ key: 'detector', term: 'Detector', value: measurement.detector.version }] : []),
  ];
}

const sensitivityWords: Readonly<Record<Sensitivity, string>> = {
  voices: 'people may be heard',
  'personal-data': 'personal data',
  'partner-agreement': 'agreement with a partner',
  'unpublished-result': 'unpublished result',
  other: 'another reason',
};
