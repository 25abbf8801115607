import { and, asc, count, eq, isNull, lte, ne, or } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { conditionTraces, videos } from '../../db/schema/beside-sound.ts';
import { recordings } from '../../db/schema/recordings.ts';

export type VideoRow = typeof videos.$inferSelect;

export function selectVideos(db: Reader, runId: string): VideoRow[] {
  return db
    .select()
    .from(videos)
    .where(and(eq(videos.runId, runId), isNull(videos.deletedAtMs)))
    .orderBy(asc(videos.createdAtMs), asc(videos.id))
    .all();
}

export function countVideos(db: Reader, runId: string): number {
  const row = db
    .select({ videos: count() })
    .from(videos)
    .where(and(eq(videos.runId, runId), isNull(videos.deletedAtMs)))
    .get();
  return row?.videos ?? 0;
}

export function selectVideo(db: Reader, id: string): VideoRow | undefined {
  return db.select().from(videos).where(eq(videos.id, id)).get();
}

export function insertVideo(db: Reader, row: VideoRow): void {
  db.insert(videos).values(row).run();
}

export function updateVideo(db: Reader, { id, ...values }: VideoRow): void {
  db.update(videos).set(values).where(eq(videos.id, id)).run();
}

/** Those that were removed at this instant or before it, the oldest first. */
export function selectVideosRemovedBefore(db: Reader, atMs: number, limit: number): VideoRow[] {
  return db
    .select()
    .from(videos)
    .where(lte(videos.deletedAtMs, atMs))
    .orderBy(asc(videos.deletedAtMs))
    .limit(limit)
    .all();
}

export function deleteVideo(db: Reader, id: string): void {
  db.delete(videos).where(eq(videos.id, id)).run();
}

/** Whether anything but this film has the same bytes; a film may have come as a recording too. */
export function isNamedElsewhere(db: Reader, { id, sha256 }: Pick<VideoRow, 'id' | 'sha256'>): boolean {
  const isOther = and(eq(videos.sha256, sha256), ne(videos.id, id));
  const traceBytes = or(eq(conditionTraces.sha256, sha256), eq(conditionTraces.pointsSha256, sha256));
  return (
    db.select({ id: videos.id }).from(videos).where(isOther).get() !== undefined ||
    db.select({ id: recordings.id }).from(recordings).where(eq(recordings.sha256, sha256)).get() !==
      undefined ||
    db.select({ id: conditionTraces.id }).from(conditionTraces).where(traceBytes).get() !== undefined
  );
}
