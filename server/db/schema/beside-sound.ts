import { index, integer, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { GrowthPhaseKind, PhaseBasis } from '../../../shared/contract/phases.ts';
import type { Confidence } from '../../../shared/contract/schemes.ts';
import type { TraceMapping, TraceQuantity } from '../../../shared/contract/traces.ts';
import type { SyncMark, VideoContainer } from '../../../shared/contract/videos.ts';
import { id, instantMs, revision } from './columns.ts';
import { passes } from './events.ts';
import { runs } from './runs.ts';
import { users } from './users.ts';

const ofRun = () =>
  text()
    .notNull()
    .references(() => runs.id);
const madeBy = () =>
  text()
    .notNull()
    .references(() => users.id);

/** A time series beside the sound. The table as it came and the points made of it lie in the store. */
export const conditionTraces = sqliteTable(
  'condition_traces',
  {
    id: id(),
    runId: ofRun(),
    name: text().notNull(),
    quantity: text().$type<TraceQuantity>().notNull(),
    unit: text().notNull(),
    fileName: text().notNull(),
    sha256: text().notNull(),
    sizeBytes: integer().notNull(),
    mapping: text({ mode: 'json' }).$type<TraceMapping>().notNull(),
    /** Pairs of float64, little-endian: seconds since the first row of the table, value. */
    pointsSha256: text().notNull(),
    points: integer().notNull(),
    durationS: real().notNull(),
    minimum: real().notNull(),
    maximum: real().notNull(),
    /** Run time of the first point. */
    runOffsetNs: integer().notNull(),
    clockPpm: real().notNull().default(0),
    createdById: madeBy(),
    createdAtMs: instantMs().notNull(),
    updatedAtMs: instantMs().notNull(),
    deletedAtMs: instantMs(),
    revision: revision(),
  },
  (table) => [index('condition_traces_run_idx').on(table.runId)],
);

/** Labelled intervals of a run, in run time, half-open; several may overlap. */
export const growthPhases = sqliteTable(
  'growth_phases',
  {
    id: id(),
    runId: ofRun(),
    /** The pass in which it was marked; `null` where the lab itself told it. */
    passId: text().references(() => passes.id),
    phase: text().$type<GrowthPhaseKind>().notNull(),
    startNs: integer().notNull(),
    endNs: integer().notNull(),
    basis: text().$type<PhaseBasis>().notNull(),
    confidence: text().$type<Confidence>().notNull(),
    note: text().notNull().default(''),
    /** Whether the sound was open to the person who marked it. */
    isSoundOpen: integer({ mode: 'boolean' }).notNull(),
    createdById: madeBy(),
    createdAtMs: instantMs().notNull(),
    updatedAtMs: instantMs().notNull(),
    deletedAtMs: instantMs(),
    revision: revision(),
  },
  (table) => [index('growth_phases_run_idx').on(table.runId, table.startNs)],
);

/** A film of the run, stored as it came. */
export const videos = sqliteTable(
  'videos',
  {
    id: id(),
    runId: ofRun(),
    fileName: text().notNull(),
    container: text().$type<VideoContainer>().notNull(),
    sha256: text().notNull(),
    sizeBytes: integer().notNull(),
    durationS: real(),
    widthPx: integer(),
    heightPx: integer(),
    framesPerS: real(),
    /** Run time of its first picture; `null` until it has been set. */
    runOffsetNs: integer(),
    /** How much faster its clock runs than that of the run. */
    clockPpm: real().notNull().default(0),
    syncMarks: text({ mode: 'json' }).$type<SyncMark[]>().notNull(),
    createdById: madeBy(),
    createdAtMs: instantMs().notNull(),
    updatedAtMs: instantMs().notNull(),
    deletedAtMs: instantMs(),
    revision: revision(),
  },
  (table) => [index('videos_run_idx').on(table.runId)],
);
