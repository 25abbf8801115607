import { and, asc, count, eq, lt, ne, sql } from 'drizzle-orm';
import type { UploadState } from '../../../shared/contract/uploads.ts';
import type { Reader } from '../../db/client.ts';
import { runs } from '../../db/schema/runs.ts';
import { uploads } from '../../db/schema/uploads.ts';

export type UploadRow = typeof uploads.$inferSelect;
export interface UploadView {
  upload: UploadRow;
  runTitle: string;
}

export function insertUpload(db: Reader, row: typeof uploads.$inferInsert): void {
  db.insert(uploads).values(row).run();
}

export function selectUpload(db: Reader, id: string): UploadRow | undefined {
  return db.select().from(uploads).where(eq(uploads.id, id)).get();
}

export function selectOpenUploads(db: Reader, ownerId: string): UploadView[] {
  return db
    .select({ upload: uploads, runTitle: runs.title })
    .from(uploads)
    .innerJoin(runs, eq(runs.id, uploads.runId))
    .where(and(eq(uploads.ownerId, ownerId), eq(uploads.state, 'open')))
    .orderBy(asc(uploads.createdAtMs), asc(uploads.id))
    .all();
}

export function countOpenUploads(db: Reader, ownerId: string): number {
  const isOpen = and(eq(uploads.ownerId, ownerId), eq(uploads.state, 'open'));
  return db.select({ count: count() }).from(uploads).where(isOpen).get()?.count ?? 0;
}

/** Bytes promised by everybody's open uploads; what of it has come lies on the disk already. */
export function sumOpenBytes(db: Reader): number {
  const sum = sql<number>`coalesce(sum(${uploads.sizeBytes}), 0)`;
  return db.select({ sum }).from(uploads).where(eq(uploads.state, 'open')).get()?.sum ?? 0;
}

/** Ends an open upload; false where it was not open any more. */
export function closeUpload(
  db: Reader,
  id: string,
  state: Exclude<UploadState, 'open'>,
  recordingId: string | null = null,
): boolean {
  const isOpen = and(eq(uploads.id, id), eq(uploads.state, 'open'));
  return db.update(uploads).set({ state, recordingId }).where(isOpen).run().changes === 1;
}

export function updateUpload(
  db: Reader,
  id: string,
  values: Pick<UploadRow, 'expiresAtMs' | 'streamId'>,
): void {
  db.update(uploads).set(values).where(eq(uploads.id, id)).run();
}

export function selectExpiredUploads(db: Reader, nowMs: number, limit: number): UploadRow[] {
  return db
    .select()
    .from(uploads)
    .where(and(eq(uploads.state, 'open'), lt(uploads.expiresAtMs, nowMs)))
    .orderBy(asc(uploads.expiresAtMs))
    .limit(limit)
    .all();
}

export function isClosedUpload(db: Reader, id: string): boolean {
  const closed = and(eq(uploads.id, id), ne(uploads.state, 'open'));
  return db.select({ id: uploads.id }).from(uploads).where(closed).get() !== undefined;
}
