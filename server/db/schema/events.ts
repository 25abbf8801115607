import { index, integer, primaryKey, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import type { EventOrigin, RecordingEvent } from '../../../shared/contract/events.ts';
import type { BurstParameters } from '../../../shared/contract/measurement.ts';
import type { ListeningAids, MarkView } from '../../../shared/contract/mark-circumstances.ts';
import type {
  CoverageWay,
  PassCoverage,
  PassKind,
  PassState,
  PassTask,
  PassWindow,
  RoundOrder,
} from '../../../shared/contract/passes.ts';
import type { Verdict } from '../../../shared/contract/verdicts.ts';
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
    /** What is marked: events, or growth phases without the sound. */
    task: text().$type<PassTask>().notNull().default('events'),
    kind: text().$type<PassKind>().notNull().default('whole'),
    /** The part of the recording that was drawn; `null` where the pass is of the whole. */
    windows: text({ mode: 'json' }).$type<PassWindow[]>(),
    /** Seed of the drawing, so that it can be checked. */
    windowSeed: integer(),
    /** In which order a pass of rounds offers the candidates. */
    roundOrder: text().$type<RoundOrder>(),
    state: text().$type<PassState>().notNull(),
    dueAtMs: instantMs(),
    instructions: text().notNull(),
    remark: text().notNull().default(''),
    schemeVersion: integer()
      .notNull()
      .references(() => labelSchemes.version),
    createdAtMs: instantMs().notNull(),
    finishedAtMs: instantMs(),
    /** How much had been looked at and heard when it was finished. */
    coverage: text({ mode: 'json' }).$type<PassCoverage>(),
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
    /** Where the person had put the start, before it was moved to a picked onset. */
    rawStartSample: integer(),
    uncertaintySamples: real(),
    aids: text({ mode: 'json' }).$type<ListeningAids>(),
    view: text({ mode: 'json' }).$type<MarkView>(),
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

/** What was looked at and heard in a pass; spans of one way and detail are joined where they touch. */
export const coverageSpans = sqliteTable(
  'coverage_spans',
  {
    id: id(),
    passId: text()
      .notNull()
      .references(() => passes.id),
    way: text().$type<CoverageWay>().notNull(),
    channel: integer().notNull(),
    startSample: integer().notNull(),
    endSample: integer().notNull(),
    /** Seen: samples per pixel at the finest. Heard: how many times slower. */
    detail: real().notNull(),
    firstAtMs: instantMs().notNull(),
    lastAtMs: instantMs().notNull(),
  },
  (table) => [index('coverage_spans_pass_idx').on(table.passId, table.way, table.channel, table.startSample)],
);

/** What a person answered to a candidate in a round; the last answer counts, the audit log has all. */
export const candidateVerdicts = sqliteTable(
  'candidate_verdicts',
  {
    id: id(),
    passId: text()
      .notNull()
      .references(() => passes.id),
    candidateId: text()
      .notNull()
      .references(() => candidates.id),
    verdict: text().$type<Verdict>().notNull(),
    /** The mark that came from it. */
    eventId: text().references(() => events.id),
    /** Answered with a group of look-alikes: which one, and whether this one was looked at itself. */
    groupKey: text(),
    isSpotCheck: integer({ mode: 'boolean' }).notNull().default(false),
    /** From showing to answering. */
    tookMs: integer(),
    byId: text()
      .notNull()
      .references(() => users.id),
    atMs: instantMs().notNull(),
    revision: revision(),
  },
  (table) => [uniqueIndex('candidate_verdicts_candidate_idx').on(table.passId, table.candidateId)],
);
