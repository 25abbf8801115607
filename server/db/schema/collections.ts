import { index, integer, primaryKey, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import type { Licence } from '../../../shared/contract/licence.ts';
import type { Release, ReleaseFile, ReleaseState } from '../../../shared/contract/releases.ts';
import type { Credit } from '../../../shared/contract/runs.ts';
import { id, instantMs, revision } from './columns.ts';
import { recordings } from './recordings.ts';
import { users } from './users.ts';

export const collections = sqliteTable('collections', {
  id: id(),
  slug: text().notNull().unique(),
  title: text().notNull(),
  description: text().notNull(),
  publisher: text().notNull(),
  contactEmail: text().notNull(),
  creators: text({ mode: 'json' }).$type<Credit[]>().notNull(),
  createdById: text()
    .notNull()
    .references(() => users.id),
  createdAtMs: instantMs().notNull(),
  revision: revision(),
});

export const collectionItems = sqliteTable(
  'collection_items',
  {
    collectionId: text()
      .notNull()
      .references(() => collections.id),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    addedAtMs: instantMs().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.collectionId, table.recordingId] }),
    index('collection_items_recording_idx').on(table.recordingId),
  ],
);

/** Number under which a person's marks appear in every release of a collection: `labeler-01`, `labeler-02` ... */
export const collectionLabelers = sqliteTable(
  'collection_labelers',
  {
    collectionId: text()
      .notNull()
      .references(() => collections.id),
    labelerId: text()
      .notNull()
      .references(() => users.id),
    ordinal: integer().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.collectionId, table.labelerId] }),
    uniqueIndex('collection_labelers_ordinal_idx').on(table.collectionId, table.ordinal),
  ],
);

export type ReleaseSummary = Pick<
  Release,
  'description' | 'publisher' | 'creators' | 'citation' | 'classes' | 'materials' | 'labs'
>;

/** The frozen JSON a release is built from, stored as a blob under its sha256. */
export const releaseSnapshots = sqliteTable('release_snapshots', {
  sha256: text().primaryKey(),
  sizeBytes: integer().notNull(),
  createdAtMs: instantMs().notNull(),
});

export const releases = sqliteTable(
  'releases',
  {
    id: id(),
    collectionId: text()
      .notNull()
      .references(() => collections.id),
    version: text().notNull(),
    state: text().$type<ReleaseState>().notNull(),
    licence: text().$type<Licence>().notNull(),
    notes: text().notNull(),
    releaseDate: text().notNull(),
    snapshotSha256: text()
      .notNull()
      .references(() => releaseSnapshots.sha256),
    /** What the page of the release tells, taken from the snapshot once. */
    summary: text({ mode: 'json' }).$type<ReleaseSummary>().notNull(),
    recordingCount: integer().notNull(),
    eventCount: integer().notNull(),
    progress: real().notNull().default(0),
    failure: text(),
    createdById: text()
      .notNull()
      .references(() => users.id),
    createdAtMs: instantMs().notNull(),
    publishedAtMs: instantMs(),
    withdrawnAtMs: instantMs(),
    withdrawnReason: text(),
  },
  (table) => [
    uniqueIndex('releases_version_idx').on(table.collectionId, table.version),
    index('releases_state_idx').on(table.state, table.publishedAtMs),
  ],
);

/** Which recordings a release holds: "released" is derived from here. */
export const releaseItems = sqliteTable(
  'release_items',
  {
    releaseId: text()
      .notNull()
      .references(() => releases.id),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
  },
  (table) => [
    primaryKey({ columns: [table.releaseId, table.recordingId] }),
    index('release_items_recording_idx').on(table.recordingId),
  ],
);

/** The built and verified archive of a release. */
export const artifacts = sqliteTable('artifacts', {
  releaseId: text()
    .primaryKey()
    .references(() => releases.id),
  fileName: text().notNull(),
  sizeBytes: integer().notNull(),
  sha256: text().notNull(),
  files: text({ mode: 'json' }).$type<ReleaseFile[]>().notNull(),
  verifiedAtMs: instantMs().notNull(),
});
