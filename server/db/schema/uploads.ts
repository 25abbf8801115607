import { index, integer, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { CameraOrigin } from '../../../shared/contract/camera.ts';
import type { DeclaredLayout } from '../../../shared/contract/layouts.ts';
import type { Licence } from '../../../shared/contract/licence.ts';
import type { Sensitivity } from '../../../shared/contract/recordings.ts';
import type { UploadState } from '../../../shared/contract/uploads.ts';
import { id, instantMs } from './columns.ts';
import { labs } from './labs.ts';
import { recordings } from './recordings.ts';
import { runs } from './runs.ts';
import { setups } from './sensors.ts';
import { users } from './users.ts';

export const uploads = sqliteTable(
  'uploads',
  {
    id: id(),
    labId: text()
      .notNull()
      .references(() => labs.id),
    runId: text()
      .notNull()
      .references(() => runs.id),
    setupId: text()
      .notNull()
      .references(() => setups.id),
    ownerId: text()
      .notNull()
      .references(() => users.id),
    fileName: text().notNull(),
    sizeBytes: integer().notNull(),
    licence: text().$type<Licence>().notNull(),
    sensitivity: text({ mode: 'json' }).$type<Sensitivity[]>().notNull(),
    note: text().notNull(),
    runOffsetNs: integer(),
    timeExpansion: real().notNull(),
    /** Told with a file that says nothing of its samples itself. */
    layout: text({ mode: 'json' }).$type<DeclaredLayout>(),
    /** The film it was taken out of. */
    camera: text({ mode: 'json' }).$type<CameraOrigin>(),
    state: text().$type<UploadState>().notNull(),
    /** Name of the byte stream in the folder of unfinished uploads; set when the first byte is announced. */
    streamId: text(),
    recordingId: text().references(() => recordings.id),
    createdAtMs: instantMs().notNull(),
    expiresAtMs: instantMs().notNull(),
  },
  (table) => [
    index('uploads_owner_idx').on(table.ownerId, table.state),
    index('uploads_expiry_idx').on(table.state, table.expiresAtMs),
  ],
);
