import { eventOriginSchema } from '../../../shared/contract/events.ts';
import type {
  ReleaseSnapshot,
  SnapshotEvent,
  SnapshotMark,
} from '../../../shared/contract/release-snapshot.ts';
import { snapshotEventSchema } from '../../../shared/contract/release-snapshot.ts';
import { confidenceSchema } from '../../../shared/contract/schemes.ts';
import { secondsText } from '../cells.ts';
import type { Column, ForeignKey, TableDefinition } from '../table.ts';
import { audioPath, indexRecordings, recordingOf, type RecordingIndex } from './audio-path.ts';

function spanColumns(recordings: RecordingIndex): Column<SnapshotMark>[] {
  const rateOf = (row: SnapshotMark) => recordingOf(recordings, row.recordingId).sampleRateHz;
  return [
    {
      name: 'file_name',
      type: 'string',
      required: true,
      description: 'Path of the audio file, as in metadata.csv.',
      value: (row) => audioPath(recordingOf(recordings, row.recordingId)),
    },
    {
      name: 'event_id',
      type: 'string',
      required: true,
      unique: true,
      description: 'Identifier of the mark; the same in every release.',
      value: (row) => row.id,
    },
    {
      name: 'channel',
      type: 'integer',
      required: true,
      minimum: 0,
      description: 'Channel, counted from 0.',
      value: (row) => row.channel,
    },
    {
      name: 'start_sample',
      type: 'integer',
      required: true,
      minimum: 0,
      description: 'First sample of the span, counted from 0. This and end_sample are the truth for time.',
      value: (row) => row.startSample,
    },
    {
      name: 'end_sample',
      type: 'integer',
      required: true,
      minimum: 1,
      description: 'First sample after the span: start_sample is in, end_sample is not.',
      value: (row) => row.endSample,
    },
    {
      name: 'start_s',
      type: 'number',
      required: true,
      minimum: 0,
      description: 'start_sample divided by sample_rate_hz of the recording, in seconds, nine digits.',
      value: (row) => secondsText(row.startSample, rateOf(row)),
    },
    {
      name: 'end_s',
      type: 'number',
      required: true,
      minimum: 0,
      description: 'end_sample divided by sample_rate_hz of the recording, in seconds, nine digits.',
      value: (row) => secondsText(row.endSample, rateOf(row)),
    },
  ];
}

function meaningColumns(snapshot: ReleaseSnapshot): Column<SnapshotMark>[] {
  return [
    {
      name: 'low_hz',
      type: 'number',
      minimum: 0,
      description: 'Lower edge of the marked band in Hz; empty where no band was marked.',
      value: (row) => row.lowHz,
    },
    {
      name: 'high_hz',
      type: 'number',
      minimum: 0,
      description: 'Upper edge of the marked band in Hz; empty where no band was marked.',
      value: (row) => row.highHz,
    },
    {
      name: 'class',
      type: 'string',
      required: true,
      enum: snapshot.scheme.classes.map((item) => item.key),
      description: 'Probable cause, by its key in classes.csv: a judgement by ear and eye, not a proof.',
      value: (row) => row.classKey,
    },
    {
      name: 'confidence',
      type: 'string',
      required: true,
      enum: confidenceSchema.options,
      description: 'How sure the person was of the class.',
      value: (row) => row.confidence,
    },
    {
      name: 'origin',
      type: 'string',
      required: true,
      enum: eventOriginSchema.options,
      description: 'Set by hand, or confirmed from a candidate of the detector.',
      value: (row) => row.origin,
    },
    {
      name: 'pass_id',
      type: 'string',
      required: true,
      description: 'The pass (one person labelling one recording) the mark belongs to, in passes.csv.',
      value: (row) => row.passId,
    },
    {
      name: 'revision',
      type: 'integer',
      required: true,
      minimum: 1,
      description: 'How often the mark had been saved when the release was made.',
      value: (row) => row.revision,
    },
    {
      name: 'note',
      type: 'string',
      isFreeText: true,
      description: 'What the person noted.',
      value: (row) => row.note,
    },
  ];
}

const foreignKeys: ForeignKey[] = [
  { field: 'file_name', table: 'recordings', targetField: 'file_name' },
  { field: 'class', table: 'classes', targetField: 'class_key' },
  { field: 'pass_id', table: 'passes', targetField: 'pass_id' },
];

const orderIn = (recordings: RecordingIndex) => (row: SnapshotMark) => [
  audioPath(recordingOf(recordings, row.recordingId)),
  row.startSample,
  row.id,
];

/** Every person's marks, under pseudonyms. */
export function marksTable(snapshot: ReleaseSnapshot): TableDefinition<SnapshotMark> {
  const recordings = indexRecordings(snapshot);
  return {
    name: 'marks',
    path: 'labels/marks.csv',
    title: 'Marks',
    description: "Every person's marks, before differences between people were settled.",
    primaryKey: ['event_id'],
    foreignKeys,
    columns: [...spanColumns(recordings), ...meaningColumns(snapshot)],
    rows: snapshot.marks,
    orderBy: orderIn(recordings),
  };
}

/** The settled events: the labels to work with. */
export function eventsTable(snapshot: ReleaseSnapshot): TableDefinition<SnapshotEvent> {
  const recordings = indexRecordings(snapshot);
  const settledBy: Column<SnapshotEvent> = {
    name: 'settled_by',
    type: 'string',
    required: true,
    enum: snapshotEventSchema.shape.settledBy.options,
    description: 'How it was settled; single-pass: one person marked the recording and nobody else compared.',
    value: (row) => row.settledBy,
  };
  return {
    name: 'events',
    path: 'labels/events.csv',
    title: 'Events',
    description: 'The settled events: what counts after the marks of people were compared.',
    primaryKey: ['event_id'],
    foreignKeys,
    columns: [...spanColumns(recordings), ...meaningColumns(snapshot), settledBy],
    rows: snapshot.events,
    orderBy: orderIn(recordings),
  };
}
