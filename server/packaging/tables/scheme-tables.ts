import type { z } from 'zod';
import type {
  ReleaseSnapshot,
  snapshotClassSchema,
  SnapshotPass,
} from '../../../shared/contract/release-snapshot.ts';
import type { TableDefinition } from '../table.ts';
import { audioPath, indexRecordings, recordingOf } from './audio-path.ts';

type SnapshotClass = z.infer<typeof snapshotClassSchema>;

export function classesTable(snapshot: ReleaseSnapshot): TableDefinition<SnapshotClass> {
  return {
    name: 'classes',
    path: 'labels/classes.csv',
    title: 'Classes',
    description: `The label scheme, version ${snapshot.scheme.version}: each class is a probable cause.`,
    primaryKey: ['class_key'],
    foreignKeys: [],
    columns: [
      {
        name: 'class_key',
        type: 'string',
        required: true,
        unique: true,
        description: 'Key of the class; it never changes its meaning.',
        value: (row) => row.key,
      },
      {
        name: 'title',
        type: 'string',
        isFreeText: true,
        description: 'Name of the class.',
        value: (row) => row.title,
      },
      {
        name: 'definition',
        type: 'string',
        isFreeText: true,
        description: 'What belongs to it.',
        value: (row) => row.definition,
      },
      {
        name: 'confused_with',
        type: 'string',
        isFreeText: true,
        description: 'What it is taken for by mistake.',
        value: (row) => row.confusedWith,
      },
    ],
    rows: snapshot.scheme.classes,
    orderBy: (row) => [row.key],
  };
}

/** A recording without a row here was marked by nobody: no event in it means nothing. */
export function passesTable(snapshot: ReleaseSnapshot): TableDefinition<SnapshotPass> {
  const recordings = indexRecordings(snapshot);
  return {
    name: 'passes',
    path: 'labels/passes.csv',
    title: 'Passes',
    description:
      "One row per finished pass: one person's labelling of one recording. A recording with a pass and no marks was listened to; one without a pass was not.",
    primaryKey: ['pass_id'],
    foreignKeys: [{ field: 'file_name', table: 'recordings', targetField: 'file_name' }],
    columns: [
      {
        name: 'pass_id',
        type: 'string',
        required: true,
        unique: true,
        description: 'Pseudonym of the pass.',
        value: (row) => row.id,
      },
      {
        name: 'file_name',
        type: 'string',
        required: true,
        description: 'Path of the audio file, as in metadata.csv.',
        value: (row) => audioPath(recordingOf(recordings, row.recordingId)),
      },
      {
        name: 'labeler',
        type: 'string',
        required: true,
        description: 'Pseudonym of the person; the same person has the same in every release.',
        value: (row) => row.labeler,
      },
      {
        name: 'blind',
        type: 'boolean',
        required: true,
        description: 'True where the person saw neither candidates nor counts nor the marks of others.',
        value: (row) => row.blind,
      },
      {
        name: 'scheme_version',
        type: 'integer',
        required: true,
        minimum: 1,
        description: 'Version of the label scheme the person worked with.',
        value: (row) => row.schemeVersion,
      },
    ],
    rows: snapshot.passes,
    orderBy: (row) => [audioPath(recordingOf(recordings, row.recordingId)), row.id],
  };
}
