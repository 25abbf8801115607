import { index, integer, primaryKey, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { EventOrigin, RecordingEvent } from '../../../shared/contract/events.ts';
import type { BurstParameters } from '../../../shared/contract/measurement.ts';
import type { PassState } from '../../../shared/contract/passes.ts';
import type { Confidence, EventClass } from '../../../shared/contract/schemes.ts';
import { id, instantMs, revision } from './columns.ts';
import { candidates } from './measurements.ts';
import { recordings } from './recordings.ts';
import { users } from './users.ts';

export const labelSchemes = sqliteTable('label_schemes', {
  version: integer().primaryKey(),
  classes: text({ mode: 'json' }).$type<EventClass[]>().notNull(),
  createdAtMs: instantMs().notNull(),
});

export const passes = sqliteTable(
  'passes',
  {
    id: id(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    labelerId: text()
      .notNull()
      .references(() => users.id),
    assignedById: text()
      .notNull()
      .references(() => users.id),
    blind: integer({ mode: 'boolean' }).notNull(),
    state: text().$type<PassState>().notNull(),
    dueAtMs: instantMs(),
    instructions: text().notNull(),
    remark: text().notNull().default(''),
    schemeVersion: integer()
      .notNull()
      .references(() => labelSchemes.version),
    createdAtMs: instantMs().notNull(),
    finishedAtMs: instantMs(),
  },
  (table) => [
    index('passes_labeler_idx').on(table.labelerId, table.state),
    index('passes_recording_idx').on(table.recordingId, table.state),
  ],
);

export const events = sqliteTable(
  'events',
  {
    id: id(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    passId: text()
      .notNull()
      .references(() => passes.id),
    channel: integer().notNull(),
    startSample: integer().notNull(),
    endSample: integer().notNull(),
    lowHz: real(),
    highHz: real(),
    classKey: text().notNull(),
    confidence: text().$type<Confidence>().notNull(),
    note: text().notNull(),
    origin: text().$type<EventOrigin>().notNull(),
    candidateId: text().references(() => candidates.id),
    parameters: text({ mode: 'json' }).$type<BurstParameters | null>(),
    createdById: text()
      .notNull()
      .references(() => users.id),
    createdAtMs: instantMs().notNull(),
    updatedAtMs: instantMs().notNull(),
    /** A deleted mark stays as a tombstone; its revisions tell what it was. */
    deletedAtMs: instantMs(),
    revision: revision(),
  },
  (table) => [
    index('events_recording_idx').on(table.recordingId, table.startSample),
    index('events_pass_idx').on(table.passId, table.startSample),
  ],
);

/** Append-only: every state an event ever had. */
export const eventRevisions = sqliteTable(
  'event_revisions',
  {
    eventId: text()
      .notNull()
      .references(() => events.id),
    revision: integer().notNull(),
    state: text({ mode: 'json' }).$type<RecordingEvent | { deleted: true }>().notNull(),
    byId: text()
      .notNull()
      .references(() => users.id),
    atMs: instantMs().notNull(),
  },
  (table) => [primaryKey({ columns: [table.eventId, table.revision] })],
);
