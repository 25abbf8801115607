import { and, asc, desc, eq, gt, inArray, or, sql, type SQL } from 'drizzle-orm';
import { countLimit } from '../../../shared/contract/page.ts';
import type { Reader } from '../../db/client.ts';
import type { RowPlace } from '../../db/row-place.ts';
import { labs } from '../../db/schema/labs.ts';
import { recordingFindings, recordings } from '../../db/schema/recordings.ts';
import { reviews } from '../../db/schema/reviews.ts';
import { runs } from '../../db/schema/runs.ts';
import { users } from '../../db/schema/users.ts';

export type FindingRow = typeof recordingFindings.$inferSelect;

const heldColumns = {
  recording: recordings,
  runTitle: runs.title,
  labName: labs.name,
  uploadedByName: users.name,
};
export type HeldView = ReturnType<typeof selectHeld>[number];

function isHeld(decidable: SQL, recordingId: string | undefined): SQL | undefined {
  return and(
    decidable,
    eq(recordings.sharing, 'held'),
    recordingId ? eq(recordings.id, recordingId) : undefined,
  );
}

interface HeldSlice {
  /** Recordings on which the person may decide, by role and lab. */
  decidable: SQL;
  recordingId: string | undefined;
  after: RowPlace | null;
  limit: number;
}

/** Oldest first. */
export function selectHeld(db: Reader, { decidable, recordingId, after, limit }: HeldSlice) {
  const { heldAtMs, id } = recordings;
  const rest = after
    ? or(gt(heldAtMs, Number(after.key)), and(eq(heldAtMs, Number(after.key)), gt(id, after.id)))
    : undefined;
  return db
    .select(heldColumns)
    .from(recordings)
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .innerJoin(labs, eq(labs.id, recordings.labId))
    .leftJoin(users, eq(users.id, recordings.uploadedById))
    .where(and(isHeld(decidable, recordingId), rest))
    .orderBy(asc(heldAtMs), asc(id))
    .limit(limit)
    .all();
}

export function countHeld(db: Reader, decidable: SQL, recordingId?: string): number {
  const limited = db
    .select({ one: sql`1`.as('one') })
    .from(recordings)
    .where(isHeld(decidable, recordingId))
    .limit(countLimit + 1)
    .as('limited');
  const row = db
    .select({ count: sql<number>`count(*)` })
    .from(limited)
    .get();
  return row?.count ?? 0;
}

export function selectFindingsOf(db: Reader, recordingIds: readonly string[]): FindingRow[] {
  return db
    .select()
    .from(recordingFindings)
    .where(inArray(recordingFindings.recordingId, [...recordingIds]))
    .orderBy(recordingFindings.foundAtMs, recordingFindings.id)
    .all();
}

export function selectDecidable(db: Reader, decidable: SQL, recordingId: string) {
  return db
    .select()
    .from(recordings)
    .where(and(eq(recordings.id, recordingId), decidable))
    .get();
}

export function insertReview(db: Reader, row: typeof reviews.$inferInsert): void {
  db.insert(reviews).values(row).run();
}

export function selectReviews(db: Reader, recordingId: string) {
  return db
    .select({ review: reviews, reviewerName: users.name })
    .from(reviews)
    .innerJoin(users, eq(users.id, reviews.reviewerId))
    .where(eq(reviews.recordingId, recordingId))
    .orderBy(desc(reviews.decidedAtMs), desc(reviews.id))
    .all();
}
