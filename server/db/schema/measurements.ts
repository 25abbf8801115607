import { index, integer, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import type { DetectedCandidate, MeasurementSummary } from '../../../shared/contract/measurement.ts';
import { id, instantMs } from './columns.ts';
import { recordings } from './recordings.ts';

export const measurements = sqliteTable(
  'measurements',
  {
    id: id(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    version: integer().notNull(),
    summary: text({ mode: 'json' }).$type<MeasurementSummary>().notNull(),
    createdAtMs: instantMs().notNull(),
    /** Empty while it is written; only what is finished is shown. */
    finishedAtMs: instantMs(),
  },
  (table) => [index('measurements_recording_idx').on(table.recordingId, table.createdAtMs)],
);

export const detectorRuns = sqliteTable(
  'detector_runs',
  {
    id: id(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    measurementId: text()
      .notNull()
      .references(() => measurements.id),
    detectorVersion: text().notNull(),
    settings: text({ mode: 'json' }).$type<Record<string, number | string>>().notNull(),
    candidateCount: integer().notNull(),
    createdAtMs: instantMs().notNull(),
  },
  (table) => [index('detector_runs_recording_idx').on(table.recordingId, table.createdAtMs)],
);

/**
 * Kept when the detector is run again: what was made from one keeps its id, and the rows of a run never change. `ordinal`
 * counts by rising onset. What lists are filtered and ordered by stands in columns of its own, and all of it in one index:
 * reading that for a whole run is many times quicker than reading the rows.
 */
export const candidates = sqliteTable(
  'candidates',
  {
    id: id(),
    detectorRunId: text()
      .notNull()
      .references(() => detectorRuns.id),
    ordinal: integer().notNull(),
    channel: integer().notNull(),
    onsetSample: integer().notNull(),
    endSample: integer().notNull(),
    peakDb: real(),
    hearingClass: text().$type<DetectedCandidate['hearingClass']>().notNull(),
    snrDb: real(),
    peakFrequencyHz: real(),
    durationUs: real(),
    energyFs2S: real(),
    ultrasonicShare: real(),
    parameters: text({ mode: 'json' }).$type<DetectedCandidate>().notNull(),
  },
  (table) => [
    uniqueIndex('candidates_ordinal_idx').on(table.detectorRunId, table.ordinal),
    index('candidates_facts_idx').on(
      table.detectorRunId,
      table.ordinal,
      table.onsetSample,
      table.endSample,
      table.channel,
      table.hearingClass,
      table.snrDb,
      table.peakDb,
      table.peakFrequencyHz,
      table.durationUs,
      table.energyFs2S,
      table.ultrasonicShare,
    ),
  ],
);
