import type { MeasurementSummary } from '../../../shared/contract/measurement.ts';
import type {
  CaptureSegment,
  GuardFinding,
  Likeness,
  Recording,
  RecordingListItem,
  ToldMeasurement,
} from '../../../shared/contract/recordings.ts';
import type { Withheld } from '../../authorize/withheld.ts';
import { toInstant } from '../../services/clock.ts';
import type { SegmentRow } from './segments.queries.ts';
import type { FindingRow, RecordingListView, RecordingRow, RecordingView } from './recordings.queries.ts';

export function toListItem(view: RecordingListView, blind: boolean): RecordingListItem {
  const { recording } = view;
  const { id, runId, labId, fileName, sizeBytes, processing, progress, sharing, format } = recording;
  return {
    ...{ id, runId, labId, fileName, sizeBytes, processing, progress, sharing },
    runTitle: view.runTitle,
    labName: view.labName,
    material: view.material,
    sampleRateHz: format.sampleRateHz,
    channels: format.channels,
    frames: format.frames,
    durationS: durationS(recording),
    ultrasonicVerdict: blind && view.ultrasonicVerdict !== 'not-observable' ? null : view.ultrasonicVerdict,
    candidateCount: blind ? null : view.candidateCount,
    createdAt: toInstant(recording.createdAtMs),
  };
}

/** What the asking person is to this recording. */
export interface Standing {
  withheld: Withheld;
  may: Recording['may'];
  /** Told to the owning lab only. */
  findings: FindingRow[];
  likenesses: Likeness[];
  eventCount: number | null;
  /** Above 0 for a capture set. */
  segmentCount: number;
  measurement: MeasurementSummary | null;
}

export function toRecording(view: RecordingView, standing: Standing): Recording {
  const { recording, setup, sensor } = view;
  const {
    setupId,
    sha256,
    licence,
    sensitivity,
    note,
    runOffsetNs,
    timeExpansion,
    format,
    layout,
    camera,
    failure,
    revision,
  } = recording;
  const { withheld, may, findings, likenesses, eventCount, segmentCount, measurement } = standing;
  return {
    ...toListItem(view, withheld.blind),
    ...{ setupId, sha256, licence, sensitivity, note, runOffsetNs, timeExpansion, format, layout },
    ...{ camera, failure, revision },
    setupName: setup.name,
    fullScaleV: setup.fullScaleV,
    preampGainDb: setup.preampGainDb,
    sensorName: sensor.name,
    sensorKind: sensor.kind,
    sensorLowHz: sensor.lowHz,
    sensorHighHz: sensor.highHz,
    uploadedByName: view.uploadedByName,
    measurement: toldMeasurement(measurement, withheld),
    findings: findings.map(toFinding),
    likenesses,
    eventCount: withheld.blind ? null : eventCount,
    captures:
      segmentCount > 0 && !withheld.sound
        ? { segments: segmentCount, liveTimeNs: recording.liveTimeNs }
        : null,
    blind: withheld.blind,
    isSoundWithheld: withheld.sound,
    may,
  };
}

export function toSegment({ startSample, frames, runTimeNs, preTriggerFrames }: SegmentRow): CaptureSegment {
  return { startSample, frames, runTimeNs, preTriggerFrames };
}

function toFinding({ id, kind, sentence, place, foundAtMs }: FindingRow): GuardFinding {
  return { id, kind, sentence, place, foundAt: toInstant(foundAtMs) };
}

function toldMeasurement(
  measurement: MeasurementSummary | null,
  { blind, sound }: Withheld,
): ToldMeasurement | null {
  if (measurement === null || sound) return null;
  return blind ? withoutDetections(measurement) : measurement;
}

/** Whoever marks blind must not learn whether, where or how often the machine heard something. */
function withoutDetections(summary: MeasurementSummary): ToldMeasurement {
  const { ultrasonic, course, descriptors } = summary;
  const isSeen = ultrasonic.verdict !== 'not-observable';
  return {
    ...summary,
    ultrasonic: {
      ...ultrasonic,
      verdict: isSeen ? 'withheld' : ultrasonic.verdict,
      reason: isSeen ? 'Told when the pass is finished.' : ultrasonic.reason,
      energyShare: null,
      burstEnergyShare: null,
      spanCount: 0,
      spans: [],
      candidates: { total: 0, below: 0, across: 0, above: 0, expectedByChance: 0 },
    },
    activeSpans: [],
    descriptors: descriptors.map((channel) => ({ ...channel, ultrasonicShare: null })),
    course: { ...course, ultrasonicDb: course.ultrasonicDb.map(() => null), candidates: [] },
  };
}

export function durationS({ format }: Pick<RecordingRow, 'format'>): number {
  return format.frames / format.sampleRateHz;
}
