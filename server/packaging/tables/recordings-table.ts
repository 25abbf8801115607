import { licenceSchema } from '../../../shared/contract/licence.ts';
import { audioFormatSchema } from '../../../shared/contract/measurement.ts';
import type { ReleaseSnapshot, SnapshotRecording } from '../../../shared/contract/release-snapshot.ts';
import { secondsText } from '../cells.ts';
import type { Column, TableDefinition } from '../table.ts';
import { audioPath } from './audio-path.ts';
import { cameraColumns } from './camera-columns.ts';
import { listeningColumns, measuredColumns } from './recording-columns.ts';

type RecordingColumn = Column<SnapshotRecording>;

const identity: RecordingColumn[] = [
  {
    name: 'file_name',
    type: 'string',
    required: true,
    unique: true,
    pattern: 'audio/[A-Za-z0-9-]+\\.(wav|flac|raw|csv|zip)',
    description: 'Path of the audio file, relative to the folder of this table.',
    value: audioPath,
  },
  {
    name: 'recording_id',
    type: 'string',
    required: true,
    unique: true,
    description: 'Identifier of the recording; the same in every release.',
    value: (row) => row.id,
  },
  {
    name: 'run_id',
    type: 'string',
    required: true,
    description: 'The run (one solidification experiment) that was recorded.',
    value: (row) => row.runId,
  },
  {
    name: 'lab',
    type: 'string',
    required: true,
    isFreeText: true,
    description: 'The lab that owns the recording.',
    value: (row) => row.labName,
  },
  {
    name: 'licence',
    type: 'string',
    required: true,
    enum: licenceSchema.options,
    description: 'SPDX identifier of the licence the lab has given for this recording.',
    value: (row) => row.licence,
  },
  {
    name: 'sha256',
    type: 'string',
    required: true,
    pattern: '[0-9a-f]{64}',
    description: 'SHA-256 of the audio file.',
    value: (row) => row.sha256,
  },
  {
    name: 'size_bytes',
    type: 'integer',
    required: true,
    minimum: 1,
    description: 'Size of the audio file in bytes.',
    value: (row) => row.sizeBytes,
  },
];

const format: RecordingColumn[] = [
  {
    name: 'sample_rate_hz',
    type: 'number',
    required: true,
    minimum: 0,
    description:
      'Samples per second of the sound itself in Hz: header_sample_rate_hz times time_expansion. Every time and frequency in these tables uses it.',
    value: (row) => row.sampleRateHz,
  },
  {
    name: 'header_sample_rate_hz',
    type: 'integer',
    required: true,
    minimum: 1,
    description: 'Sample rate in Hz as the header of the file says it.',
    value: (row) => row.format.sampleRateHz,
  },
  {
    name: 'time_expansion',
    type: 'number',
    required: true,
    minimum: 1,
    description: 'The factor by which the file plays slower than life; 1 where it does not.',
    value: (row) => row.timeExpansion,
  },
  {
    name: 'frames',
    type: 'integer',
    required: true,
    minimum: 1,
    description: 'Number of samples of each channel.',
    value: (row) => row.format.frames,
  },
  {
    name: 'duration_s',
    type: 'number',
    required: true,
    minimum: 0,
    description: 'frames divided by sample_rate_hz, in seconds.',
    value: (row) => secondsText(row.format.frames, row.sampleRateHz),
  },
  {
    name: 'channels',
    type: 'integer',
    required: true,
    minimum: 1,
    maximum: 64,
    description: 'Number of channels; they are counted from 0.',
    value: (row) => row.format.channels,
  },
  {
    name: 'container',
    type: 'string',
    required: true,
    enum: audioFormatSchema.shape.container.options,
    description:
      'Form of the file: RIFF, or its 64-bit forms RF64 and BW64; FLAC; raw, samples without a header; CSV; capture-set, a ZIP of triggered segments.',
    value: (row) => row.format.container,
  },
  {
    name: 'encoding',
    type: 'string',
    required: true,
    enum: audioFormatSchema.shape.encoding.options,
    description: 'Samples as integers or as floating-point numbers.',
    value: (row) => row.format.encoding,
  },
  {
    name: 'bits_per_sample',
    type: 'integer',
    required: true,
    minimum: 8,
    maximum: 64,
    description: 'Bits of one sample of one channel.',
    value: (row) => row.format.bitsPerSample,
  },
  {
    name: 'declared_layout',
    type: 'string',
    description:
      'How the samples lie, as JSON, where the file does not say it itself: in raw files and CSV. Columns count from 0.',
    value: (row) => (row.layout === null ? null : JSON.stringify(row.layout)),
  },
  {
    name: 'run_offset_ns',
    type: 'integer',
    description: 'Place of the first sample on the clock of the run, in nanoseconds from its start.',
    value: (row) => row.runOffsetNs,
  },
];

/** One row per recording; by its first column, loaders of audio data sets find the files. */
export function recordingsTable(snapshot: ReleaseSnapshot): TableDefinition<SnapshotRecording> {
  return {
    name: 'recordings',
    path: 'metadata.csv',
    title: 'Recordings',
    description:
      'One row per recording: file, format, sensor and set-up, and what was measured over the whole.',
    primaryKey: ['file_name'],
    foreignKeys: [{ field: 'run_id', table: 'runs', targetField: 'run_id' }],
    columns: [...identity, ...format, ...cameraColumns, ...listeningColumns, ...measuredColumns],
    rows: snapshot.recordings,
    orderBy: (row) => [audioPath(row)],
  };
}
