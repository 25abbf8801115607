import { blob, index, integer, primaryKey, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { Likeness } from '../../../shared/contract/recordings.ts';
import { recordings } from './recordings.ts';

/** What a channel sounds like, for finding its copies; silent ones have no row. */
export const recordingSounds = sqliteTable(
  'recording_sounds',
  {
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    channel: integer().notNull(),
    pcmSha256: text().notNull(),
    /** Words of the fingerprint, 16 bits little-endian each. */
    words: blob({ mode: 'buffer' }).notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.recordingId, table.channel] }),
    index('recording_sounds_pcm_idx').on(table.pcmSha256),
  ],
);

/** Where a fingerprint may be entered: the key comes first, since it is what is looked up. */
export const recordingSoundKeys = sqliteTable(
  'recording_sound_keys',
  {
    key: integer().notNull(),
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    channel: integer().notNull(),
    step: integer().notNull(),
  },
  (table) => [primaryKey({ columns: [table.key, table.recordingId, table.channel, table.step] })],
);

/** Pairs of recordings that hold the same sound, written when the first of them was measured; told as the rules allow. */
export const recordingLikenesses = sqliteTable(
  'recording_likenesses',
  {
    recordingId: text()
      .notNull()
      .references(() => recordings.id),
    otherId: text()
      .notNull()
      .references(() => recordings.id),
    kind: text().$type<Likeness['kind']>().notNull(),
    channel: integer().notNull(),
    otherChannel: integer().notNull(),
    /** Time in the other recording of the first sample of this one. */
    offsetS: real().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.recordingId, table.otherId] }),
    index('recording_likenesses_other_idx').on(table.otherId),
  ],
);
