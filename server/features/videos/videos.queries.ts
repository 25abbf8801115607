import { and, asc, count, eq, isNull } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { videos } from '../../db/schema/beside-sound.ts';

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
