import { and, eq, inArray, ne, or, sql, type SQL } from 'drizzle-orm';
import type { Likeness } from '../../../shared/contract/recordings.ts';
import type { Reader } from '../../db/client.ts';
import { labs } from '../../db/schema/labs.ts';
import { recordingLikenesses, recordingSoundKeys, recordingSounds } from '../../db/schema/likeness.ts';
import { recordings } from '../../db/schema/recordings.ts';

export type SoundRow = typeof recordingSounds.$inferInsert;
export type SoundKeyRow = typeof recordingSoundKeys.$inferInsert;
export type LikenessRow = typeof recordingLikenesses.$inferSelect;

export function insertSounds(db: Reader, rows: readonly SoundRow[]): void {
  if (rows.length > 0)
    db.insert(recordingSounds)
      .values([...rows])
      .run();
}

const keysPerStatement = 1000;

export function insertSoundKeys(db: Reader, rows: readonly SoundKeyRow[]): void {
  for (let at = 0; at < rows.length; at += keysPerStatement) {
    const some = rows.slice(at, at + keysPerStatement);
    db.insert(recordingSoundKeys).values(some).onConflictDoNothing().run();
  }
}

export function insertLikenesses(db: Reader, rows: readonly LikenessRow[]): void {
  if (rows.length > 0)
    db.insert(recordingLikenesses)
      .values([...rows])
      .onConflictDoNothing()
      .run();
}

/** What an unfinished measurement left. */
export function deleteSounds(db: Reader, recordingId: string): void {
  const isOf = { keys: recordingSoundKeys, sounds: recordingSounds, likenesses: recordingLikenesses };
  db.delete(isOf.keys).where(eq(isOf.keys.recordingId, recordingId)).run();
  db.delete(isOf.sounds).where(eq(isOf.sounds.recordingId, recordingId)).run();
  db.delete(isOf.likenesses).where(eq(isOf.likenesses.recordingId, recordingId)).run();
}

/** Other recordings made of the very same bytes. */
export function selectSameFiles(db: Reader, recordingId: string): { otherId: string }[] {
  const own = db.select({ sha256: recordings.sha256 }).from(recordings).where(eq(recordings.id, recordingId));
  return db
    .select({ otherId: recordings.id })
    .from(recordings)
    .where(and(eq(recordings.sha256, sql`(${own})`), ne(recordings.id, recordingId)))
    .all();
}

/** Channels of other recordings with these very samples. */
export function selectSameSamples(db: Reader, recordingId: string, pcmSha256s: readonly string[]) {
  const { recordingId: otherId, channel: otherChannel, pcmSha256 } = recordingSounds;
  return db
    .select({ otherId, otherChannel, pcmSha256 })
    .from(recordingSounds)
    .where(and(inArray(pcmSha256, [...pcmSha256s]), ne(otherId, recordingId)))
    .all();
}

export function selectByKeys(db: Reader, recordingId: string, keys: readonly number[]) {
  const { key, recordingId: otherId, channel: otherChannel, step } = recordingSoundKeys;
  return db
    .select({ key, otherId, otherChannel, step })
    .from(recordingSoundKeys)
    .where(and(inArray(key, [...keys]), ne(otherId, recordingId)))
    .all();
}

export function selectWords(db: Reader, recordingId: string, channel: number): Buffer | undefined {
  return db
    .select({ words: recordingSounds.words })
    .from(recordingSounds)
    .where(and(eq(recordingSounds.recordingId, recordingId), eq(recordingSounds.channel, channel)))
    .get()?.words;
}

/** Of some recordings, those that a person may see. @param visible condition on `recordings`. */
export function selectVisibleIds(db: Reader, ids: readonly string[], visible: SQL): Set<string> {
  const rows = db
    .select({ id: recordings.id })
    .from(recordings)
    .where(and(inArray(recordings.id, [...ids]), visible))
    .all();
  return new Set(rows.map(({ id }) => id));
}

/**
 * Recordings with the same sound as this one, seen from it, as far as they may be seen; most recent first.
 * @param visible condition on `recordings`.
 */
export function selectLikenesses(db: Reader, recordingId: string, visible: SQL): Likeness[] {
  const { recordingId: ownId, otherId, kind, channel, otherChannel, offsetS } = recordingLikenesses;
  const rows = db
    .select({
      ...{ ownId, kind, channel, otherChannel, offsetS },
      recordingId: recordings.id,
      fileName: recordings.fileName,
      labName: labs.name,
    })
    .from(recordingLikenesses)
    .innerJoin(
      recordings,
      or(
        and(eq(ownId, recordingId), eq(recordings.id, otherId)),
        and(eq(otherId, recordingId), eq(recordings.id, ownId)),
      ),
    )
    .innerJoin(labs, eq(labs.id, recordings.labId))
    .where(and(or(eq(ownId, recordingId), eq(otherId, recordingId)), visible))
    .orderBy(sql`${recordings.createdAtMs} desc`, recordings.id)
    .all();
  const distinct = new Map(
    rows.map(({ ownId: from, ...row }) => [row.recordingId, from === recordingId ? row : turned(row)]),
  );
  return [...distinct.values()];
}

function turned(likeness: Likeness): Likeness {
  const { channel, otherChannel, offsetS } = likeness;
  return { ...likeness, channel: otherChannel, otherChannel: channel, offsetS: -offsetS };
}
