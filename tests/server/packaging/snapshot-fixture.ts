import { createHash } from 'node:crypto';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { BurstParameters } from '../../../shared/contract/measurement.ts';
import type {
  ReleaseSnapshot,
  SnapshotEvent,
  SnapshotMark,
  SnapshotRecording,
} from '../../../shared/contract/release-snapshot.ts';

/** A 16-bit mono WAV of seeded noise, with an odd-sized chunk before the samples that must come out unchanged. */
export function makeWav(seed: number, frames = 480, sampleRateHz = 48_000): Buffer {
  const note = Buffer.from([0x6e, 0x6f, 0x74, 0x65, 3, 0, 0, 0, 0x61, 0x62, 0x63, 0]);
  const header = Buffer.alloc(36);
  header.write('RIFF', 0, 'latin1');
  header.writeUInt32LE(36 + note.length + 8 + frames * 2 - 8, 4);
  header.write('WAVEfmt ', 8, 'latin1');
  header.writeUInt32LE(16, 16);
  header.writeUInt16LE(1, 20);
  header.writeUInt16LE(1, 22);
  header.writeUInt32LE(sampleRateHz, 24);
  header.writeUInt32LE(sampleRateHz * 2, 28);
  header.writeUInt16LE(2, 32);
  header.writeUInt16LE(16, 34);
  const dataHead = Buffer.alloc(8);
  dataHead.write('data', 0, 'latin1');
  dataHead.writeUInt32LE(frames * 2, 4);
  return Buffer.concat([header, note, dataHead, noise(seed, frames)]);
}

function noise(seed: number, frames: number): Buffer {
  const samples = Buffer.alloc(frames * 2);
  let state = (seed + 1) >>> 0;
  for (let index = 0; index < frames; index++) {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    samples.writeInt16LE((state >>> 18) - 8192, index * 2);
  }
  return samples;
}

export const sha256Hex = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex');

const burst: BurstParameters = {
  onsetSample: 100,
  endSample: 140,
  peakSample: 104,
  onsetUncertaintyUs: null,
  peakDb: -12.5,
  peakDbAe: null,
  riseTimeUs: 83.33333333333333,
  durationUs: 833.3333333333334,
  counts: 7,
  energyFs2S: 2.5e-7,
  energyV2S: null,
  rmsDb: -20,
  averageFrequencyHz: 8400,
  raMsPerV: null,
  peakFrequencyHz: 9000,
  centroidHz: 9100.5,
  ultrasonicShare: null,
  hearingClass: 'unknown',
  snrDb: 18.25,
  clipped: false,
};

const idOf = (index: number) => `01890000-0000-7000-8000-${String(index).padStart(12, '0')}`;

function recordingRow(index: number, wav: Buffer): SnapshotRecording {
  const id = idOf(index);
  return {
    id,
    runId: 'run-1',
    fileName: `${id}.wav`,
    sha256: sha256Hex(wav),
    sizeBytes: wav.length,
    licence: 'CC-BY-4.0',
    labName: 'Ice Laboratory, "North"',
    format: {
      container: 'RIFF',
      encoding: 'integer',
      bitsPerSample: 16,
      channels: 1,
      sampleRateHz: 48_000,
      frames: 480,
      extensible: false,
    },
    layout: null,
    camera: null,
    sampleRateHz: 48_000,
    timeExpansion: 1,
    runOffsetNs: index === 0 ? null : 1_500_000_000,
    sensor: {
      name: 'Plate sensor',
      kind: 'contact-ae',
      model: null,
      lowHz: 20_000,
      highHz: 400_000,
      sensitivity: null,
    },
    setup: {
      name: 'On the wall',
      coupling: 'grease',
      mounting: null,
      distanceM: 0.05,
      preampGainDb: 40,
      filterLowHz: null,
      filterHighHz: null,
      automaticGain: 'off',
      fullScaleV: 1,
    },
    measured: {
      measurementVersion: '1',
      detectorVersion: '1.0.0',
      effectiveBandwidthHz: 24_000,
      bandwidthEdge: 'none',
      ultrasonicVerdict: 'not-observable',
      ultrasonicReason: 'The sample rate ends at 24 kHz.',
      ultrasonicBandLowHz: null,
      ultrasonicBandHighHz: null,
      ultrasonicEnergyShare: null,
      rmsDb: -18.0618,
      peakDb: -12,
      clippedSamples: 0,
    },
    note: '=HYPERLINK("x")',
  };
}

function markRow(index: number): SnapshotMark {
  return {
    id: `01890000-0000-7000-9000-${String(index).padStart(12, '0')}`,
    recordingId: idOf(0),
    passId: 'pass-001',
    channel: 0,
    startSample: 100 + index,
    endSample: 140 + index,
    lowHz: index === 0 ? null : 2000.5,
    highHz: index === 0 ? null : 22_000,
    classKey: 'crack',
    confidence: 'probable',
    origin: 'hand',
    revision: 1,
    note: 'line one\nline "two", with comma',
  };
}

const toEvent = (mark: SnapshotMark): SnapshotEvent => ({
  ...mark,
  settledBy: 'single-pass',
  parameters: { ...burst },
});

export interface SnapshotFixture {
  snapshot: ReleaseSnapshot;
  /** Bytes by their sha256. */
  audio: Map<string, Buffer>;
}

/** A small release of invented recordings; `change` makes variants of it. */
export function makeSnapshot(
  recordingCount = 2,
  change: (snapshot: ReleaseSnapshot) => void = () => undefined,
): SnapshotFixture {
  const wavs = Array.from({ length: recordingCount }, (_, index) => makeWav(index));
  const marks = [markRow(0), markRow(1), markRow(2)];
  const snapshot: ReleaseSnapshot = {
    snapshotVersion: 1,
    generatorVersion: '0.1.0',
    collection: {
      id: 'collection-1',
      slug: 'ice-cracks',
      title: 'Cracks in freezing water: "north" series',
      description:
        'Contact recordings of water freezing in a small cup.\n\n# Not a heading\nMade to be read by programs.',
    },
    version: '1.10.0',
    releaseDate: '2026-03-01',
    licence: 'CC-BY-4.0',
    notes: 'Two recordings were added.',
    changelog: [
      { version: '1.0.0', releaseDate: '2026-01-15', notes: 'First release.' },
      { version: '1.10.0', releaseDate: '2026-03-01', notes: 'Two recordings were added.' },
    ],
    publisher: 'Ice Laboratory',
    contactEmail: 'data@ice.example',
    doi: '10.5072/ice-cracks.1',
    creators: [
      { name: 'Ada Example', orcid: '0000-0002-1825-0097', role: 'experiment' },
      { name: 'Bjørn Example', orcid: null, role: 'analysis' },
      { name: 'Ada Example', orcid: '0000-0002-1825-0097', role: 'writing' },
    ],
    scheme: {
      version: 1,
      classes: [
        { key: 'crack', title: 'Crack', definition: 'Fracture.', confusedWith: 'Ticks of the vessel.' },
        { key: 'bubble', title: 'Bubble', definition: 'Boiling or gas.', confusedWith: '' },
      ],
    },
    runs: [
      {
        id: 'run-1',
        labName: 'Ice Laboratory, "North"',
        title: 'Cup, first evening',
        kind: 'experiment',
        material: 'water',
        composition: null,
        process: 'bulk-freezing',
        container: 'steel cup',
        cooling: 'cold plate',
        coolingRateKPerS: 0.01,
        pressurePa: 101_325,
        startTemperatureC: -5.5,
        supercoolingK: 5.5,
        startedAt: '2026-01-02T18:00:00Z',
        specimen: 'cup-3',
        notes: '-1 means one below',
      },
    ],
    recordings: wavs.map((wav, index) => recordingRow(index, wav)),
    passes: [{ id: 'pass-001', recordingId: idOf(0), labeler: 'labeler-01', blind: true, schemeVersion: 1 }],
    marks,
    events: marks.slice(0, 2).map(toEvent),
  };
  change(snapshot);
  return { snapshot, audio: new Map(wavs.map((wav) => [sha256Hex(wav), wav])) };
}

export interface Workplace {
  directory: string;
  openAudio: (sha256: string) => string;
  remove: () => Promise<void>;
}

/** A folder of its own with the audio of a fixture lying in it under its sha256. */
export async function makeWorkplace(audio: Map<string, Buffer>): Promise<Workplace> {
  const directory = await mkdtemp(join(tmpdir(), 'packaging-'));
  for (const [sha256, bytes] of audio) await writeFile(join(directory, sha256), bytes);
  return {
    directory,
    openAudio: (sha256) => join(directory, sha256),
    remove: () => rm(directory, { recursive: true, force: true }),
  };
}
