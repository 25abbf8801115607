import { FILE_KINDS } from '../../../shared/audio/file-kind.ts';
import type { CameraOrigin } from '../../../shared/contract/camera.ts';
import type {
  SnapshotEvent,
  SnapshotMark,
  SnapshotPass,
  SnapshotRecording,
  SnapshotRun,
} from '../../../shared/contract/release-snapshot.ts';
import { toInstant } from '../../services/clock.ts';
import type { FinishedPass, Mark, Measured, MemberFacts } from './snapshot.queries.ts';

export function toSnapshotRun({ run, labName }: MemberFacts): SnapshotRun {
  const { id, title, kind, material, composition, process, container, cooling } = run;
  const { coolingRateKPerS, pressurePa, startTemperatureC, supercoolingK, specimen, notes } = run;
  return {
    ...{ id, labName, title, kind, material, composition, process, container, cooling },
    ...{ coolingRateKPerS, pressurePa, startTemperatureC, supercoolingK, specimen, notes },
    startedAt: run.startedAtMs === null ? null : toInstant(run.startedAtMs),
  };
}

export function toSnapshotRecording(facts: MemberFacts, measured: Measured): SnapshotRecording {
  const { recording, labName, setup, sensor } = facts;
  const { id, runId, sha256, sizeBytes, licence, timeExpansion, runOffsetNs, note } = recording;
  const { warnings: _warnings, ...format } = recording.format;
  return {
    ...{ id, runId, sha256, sizeBytes, licence, labName, timeExpansion, runOffsetNs, note },
    fileName: `${id}.${FILE_KINDS[recording.format.container].extension}`,
    format: { ...format, sampleRateHz: Math.round(format.sampleRateHz / timeExpansion) },
    layout: recording.layout,
    camera: recording.camera && toSnapshotCamera(recording.camera),
    sampleRateHz: format.sampleRateHz,
    sensor: toSnapshotSensor(sensor),
    setup: toSnapshotSetup(setup),
    measured: toSnapshotMeasured(measured),
  };
}

/** What a film was called can name people and places, as the names of uploaded files can. */
function toSnapshotCamera({ fileName: _fileName, ...camera }: CameraOrigin): SnapshotRecording['camera'] {
  return camera;
}

function toSnapshotSensor({ name, kind, model, lowHz, highHz, sensitivity }: MemberFacts['sensor']) {
  return { name, kind, model, lowHz, highHz, sensitivity };
}

function toSnapshotSetup(setup: MemberFacts['setup']): SnapshotRecording['setup'] {
  const { name, coupling, mounting, distanceM, preampGainDb } = setup;
  const { filterLowHz, filterHighHz, automaticGain, fullScaleV } = setup;
  return {
    name,
    coupling,
    mounting,
    distanceM,
    preampGainDb,
    filterLowHz,
    filterHighHz,
    automaticGain,
    fullScaleV,
  };
}

function toSnapshotMeasured({ measurement, detectorVersion }: Measured): SnapshotRecording['measured'] {
  const { levels, bandwidth, ultrasonic } = measurement.summary;
  const strongest = (values: (number | null)[]) => {
    const known = values.filter((value) => value !== null);
    return known.length === 0 ? null : Math.max(...known);
  };
  return {
    measurementVersion: String(measurement.version),
    detectorVersion,
    effectiveBandwidthHz: bandwidth.effectiveHz,
    bandwidthEdge: bandwidth.edge,
    ultrasonicVerdict: ultrasonic.verdict,
    ultrasonicReason: ultrasonic.reason,
    ultrasonicBandLowHz: ultrasonic.bandLowHz,
    ultrasonicBandHighHz: ultrasonic.bandHighHz,
    ultrasonicEnergyShare: ultrasonic.energyShare,
    rmsDb: strongest(levels.map((level) => level.rmsDb)),
    peakDb: strongest(levels.map((level) => level.peakDb)),
    clippedSamples: levels.reduce((sum, level) => sum + level.clippedSamples, 0),
  };
}

export function toSnapshotPass(pass: FinishedPass, labelerNumber: number): SnapshotPass {
  const { id, recordingId, blind, schemeVersion } = pass;
  return {
    id,
    recordingId,
    blind,
    schemeVersion,
    labeler: `labeler-${String(labelerNumber).padStart(2, '0')}`,
  };
}

export function toSnapshotMark(mark: Mark): SnapshotMark {
  const { id, recordingId, passId, channel, startSample, endSample, lowHz, highHz } = mark;
  const { classKey, confidence, origin, revision, note } = mark;
  const place = { id, recordingId, passId, channel, startSample, endSample, lowHz, highHz };
  return { ...place, classKey, confidence, origin, revision, note };
}

export function toSnapshotEvent(mark: Mark): SnapshotEvent {
  return { ...toSnapshotMark(mark), settledBy: 'single-pass', parameters: mark.parameters ?? null };
}
