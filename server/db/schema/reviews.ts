import { index, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { Decision } from '../../../shared/contract/reviews.ts';
import type { Sharing } from '../../../shared/contract/recordings.ts';
import { id, instantMs } from './columns.ts';
import { recordings } from './recordings.ts';
import { users } from './users.ts';

export const reviews = sqliteTable(
  'reviews',
  {
    id: id(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    reviewerId: text()
      .notNull()
      .references(() => users.id),
    decision: text().$type<Decision>().notNull(),
    reason: text().notNull(),
    sharing: text().$type<Sharing>().notNull(),
    decidedAtMs: instantMs().notNull(),
  },
  (table) => [index('reviews_recording_idx').on(table.recordingId, table.decidedAtMs)],
);
