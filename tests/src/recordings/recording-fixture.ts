import type { MeasurementSummary, Ultrasound } from '@shared/contract/measurement.ts';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { Recording } from '@shared/contract/recordings.ts';

const id = '019a0000-0000-7000-8000-000000000001';

export const format = {
  container: 'RIFF' as const,
  encoding: 'integer' as const,
  bitsPerSample: 16,
  channels: 1,
  sampleRateHz: 1_000_000,
  frames: 86_400_000,
  extensible: false,
  warnings: [],
};

export function ultrasound(part: Partial<Ultrasound> = {}): Ultrasound {
  return {
    verdict: 'found',
    reason: 'Energy above 20 kHz as this sensor sees it.',
    bandLowHz: 1000,
    bandHighHz: 400_000,
    energyShare: 0.4,
    burstEnergyShare: 0.98,
    spanCount: 3,
    spans: [],
    candidates: { total: 214, below: 1, across: 4, above: 209, expectedByChance: 1.6 },
    ...part,
  };
}

export function measurement(ultrasonic = ultrasound(), rmsDb: number | null = -50): MeasurementSummary {
  const level = {
    channel: 0,
    rmsDb,
    peakDb: rmsDb,
    crestDb: 12,
    dcFraction: 0,
    clippedSamples: 0,
    clippedRuns: 0,
    nonFiniteSamples: 0,
  };
  return {
    version: 1,
    format,
    levels: [level],
    descriptors: [],
    quality: [],
    bandwidth: { effectiveHz: 412_000, edge: 'none', reason: 'The noise floor shows no edge.' },
    contents: [{ channel: 0, effectiveBits: 16, pcmSha256: 'b'.repeat(64) }],
    ultrasonic,
    activeSpans: [],
    course: {
      samplesPerStep: 1_000_000,
      levelDb: [-50, -40, null],
      ultrasonicDb: [-80, -60, -80],
      candidates: [0, 12, 1],
    },
    detector: { version: 'band-split-1', settings: {} },
  };
}

/** A measured, shared recording of a contact sensor. */
export function recording(part: Partial<Recording> = {}): Recording {
  return {
    id,
    runId: id,
    runTitle: 'Film 07',
    labId: id,
    labName: 'Northlight Solidification Lab',
    material: 'water',
    fileName: 'film-07.wav',
    sizeBytes: 172_800_044,
    sampleRateHz: 1_000_000,
    channels: 1,
    frames: 86_400_000,
    durationS: 86.4,
    processing: 'measured',
    progress: 1,
    sharing: 'shared',
    ultrasonicVerdict: 'found',
    candidateCount: 214,
    createdAt: '2026-03-02T10:00:00.000Z',
    setupId: id,
    setupName: 'Under the stage',
    sensorName: 'Contact sensor A',
    sensorKind: 'contact-ae',
    sensorLowHz: 1000,
    sensorHighHz: 400_000,
    fullScaleV: 10,
    preampGainDb: 40,
    sha256: 'a'.repeat(64),
    licence: 'CC-BY-4.0',
    sensitivity: [],
    note: '',
    runOffsetNs: 0,
    timeExpansion: 1,
    layout: null,
    camera: null,
    captures: null,
    uploadedByName: 'Tomasz Brandvold',
    format,
    measurement: measurement(),
    failure: null,
    findings: [],
    likenesses: [],
    eventCount: 0,
    blind: false,
    isSoundWithheld: false,
    may: { downloadAudio: true, decide: false, assign: false, mark: false },
    revision: 1,
    ...part,
  };
}

export function candidate(part: Partial<Candidate> = {}): Candidate {
  return {
    id,
    ordinal: 0,
    channel: 0,
    channels: [0],
    onsetS: 12.0345,
    onsetSample: 12_034_500,
    endSample: 12_035_500,
    peakSample: 12_034_700,
    onsetUncertaintyUs: 2,
    peakDb: -12.4,
    peakDbAe: null,
    riseTimeUs: 200,
    durationUs: 1000,
    counts: 12,
    energyFs2S: 1e-9,
    energyV2S: null,
    rmsDb: -20,
    averageFrequencyHz: 80_000,
    raMsPerV: null,
    peakFrequencyHz: 120_000,
    centroidHz: 110_000,
    ultrasonicShare: 0.99,
    hearingClass: 'above',
    snrDb: 31,
    clipped: false,
    rises: 1,
    bandLowHz: 20_000,
    bandHighHz: 400_000,
    ...part,
  };
}
