import { count, eq } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { recordingSegments } from '../../db/schema/recordings.ts';

export type SegmentRow = typeof recordingSegments.$inferSelect;

/** Few enough for the parameters of one statement. */
const rowsPerInsert = 2000;

export function insertSegments(db: Reader, rows: readonly SegmentRow[]): void {
  for (let from = 0; from < rows.length; from += rowsPerInsert) {
    db.insert(recordingSegments)
      .values(rows.slice(from, from + rowsPerInsert))
      .run();
  }
}

export function selectSegments(db: Reader, recordingId: string): SegmentRow[] {
  return db
    .select()
    .from(recordingSegments)
    .where(eq(recordingSegments.recordingId, recordingId))
    .orderBy(recordingSegments.startSample)
    .all();
}

export function countSegments(db: Reader, recordingId: string): number {
  const row = db
    .select({ segments: count() })
    .from(recordingSegments)
    .where(eq(recordingSegments.recordingId, recordingId))
    .get();
  return row?.segments ?? 0;
}
