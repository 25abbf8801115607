import { index, integer, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import type { CameraOrigin } from '../../../shared/contract/camera.ts';
import type { StoredLayout } from '../../../shared/contract/layouts.ts';
import type { Licence } from '../../../shared/contract/licence.ts';
import type { AudioFormat } from '../../../shared/contract/measurement.ts';
import type { GuardFinding, Processing, Sensitivity, Sharing } from '../../../shared/contract/recordings.ts';
import { id, instantMs, revision } from './columns.ts';
import { labs } from './labs.ts';
import { runs } from './runs.ts';
import { setups } from './sensors.ts';
import { users } from './users.ts';

export const recordings = sqliteTable(
  'recordings',
  {
    id: id(),
    runId: text()
      .notNull()
      .references(() => runs.id),
    /** The lab of the run, repeated here because rules and lists ask for it. */
    labId: text()
      .notNull()
      .references(() => labs.id),
    setupId: text()
      .notNull()
      .references(() => setups.id),
    uploadedById: text()
      .notNull()
      .references(() => users.id),
    fileName: text().notNull(),
    sizeBytes: integer().notNull(),
    sha256: text().notNull(),
    format: text({ mode: 'json' }).$type<AudioFormat>().notNull(),
    licence: text().$type<Licence>().notNull(),
    sensitivity: text({ mode: 'json' }).$type<Sensitivity[]>().notNull(),
    note: text().notNull(),
    runOffsetNs: integer(),
    clockPpm: real().notNull().default(0),
    timeExpansion: real().notNull().default(1),
    /** How the samples lie, where the file itself does not say. */
    layout: text({ mode: 'json' }).$type<StoredLayout>(),
    /** The film it was taken out of. */
    camera: text({ mode: 'json' }).$type<CameraOrigin>(),
    /** How long a trigger would have been answered; `null` where the recording is continuous, or nobody said. */
    liveTimeNs: integer(),
    processing: text().$type<Processing>().notNull(),
    progress: real().notNull().default(0),
    failure: text(),
    sharing: text().$type<Sharing>().notNull(),
    heldAtMs: instantMs(),
    createdAtMs: instantMs().notNull(),
    updatedAtMs: instantMs().notNull(),
    revision: revision(),
  },
  (table) => [
    index('recordings_run_idx').on(table.runId),
    index('recordings_lab_idx').on(table.labId, table.createdAtMs),
    index('recordings_sharing_idx').on(table.sharing, table.createdAtMs),
    index('recordings_sha256_idx').on(table.sha256),
    index('recordings_created_idx').on(table.createdAtMs),
  ],
);

/** Stretches of one recording with a place of their own on the run's clock. */
export const recordingSegments = sqliteTable(
  'recording_segments',
  {
    id: id(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    startSample: integer().notNull(),
    frames: integer().notNull(),
    runTimeNs: integer(),
    /** Frames of it before its trigger. */
    preTriggerFrames: integer(),
  },
  (table) => [uniqueIndex('recording_segments_start_idx').on(table.recordingId, table.startSample)],
);

export const recordingFindings = sqliteTable(
  'recording_findings',
  {
    id: id(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    kind: text().$type<GuardFinding['kind']>().notNull(),
    sentence: text().notNull(),
    place: text(),
    foundAtMs: instantMs().notNull(),
  },
  (table) => [index('recording_findings_recording_idx').on(table.recordingId)],
);
