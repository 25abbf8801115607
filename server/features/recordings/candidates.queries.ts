import { and, asc, desc, eq, gt, lt, sql, type SQL } from 'drizzle-orm';
import { countLimit } from '../../../shared/contract/page.ts';
import type { ListCandidatesQuery } from '../../../shared/contract/recordings.ts';
import type { Reader } from '../../db/client.ts';
import type { RowPlace } from '../../db/row-place.ts';
import { candidates, detectorRuns } from '../../db/schema/measurements.ts';

export type CandidateRow = typeof candidates.$inferSelect;
export type CandidateFilters = Omit<ListCandidatesQuery, 'cursor' | 'limit' | 'sort'>;

export function selectNewestDetectorRunId(db: Reader, measurementId: string): string | undefined {
  return db
    .select({ id: detectorRuns.id })
    .from(detectorRuns)
    .where(eq(detectorRuns.measurementId, measurementId))
    .orderBy(desc(detectorRuns.createdAtMs), desc(detectorRuns.id))
    .limit(1)
    .get()?.id;
}

/** A candidate belongs to a window when any part of it lies inside; both ends are exclusive. */
function matching(detectorRunId: string, filters: CandidateFilters): SQL | undefined {
  const { channel, startSample, endSample, hearingClass } = filters;
  return and(
    eq(candidates.detectorRunId, detectorRunId),
    channel === undefined ? undefined : eq(candidates.channel, channel),
    startSample === undefined ? undefined : gt(candidates.endSample, startSample),
    endSample === undefined ? undefined : lt(candidates.onsetSample, endSample),
    hearingClass === undefined ? undefined : eq(candidates.hearingClass, hearingClass),
  );
}

/** Stands in for a level that is not known, below every one that is. */
const unknownPeakDb = -1e9;
const peakOrLowest = sql<number>`coalesce(${candidates.peakDb}, ${unknownPeakDb})`;

const orders = {
  onset: { by: asc(candidates.onsetSample), key: sql<number>`${candidates.onsetSample}`, past: sql`>` },
  strongest: { by: desc(peakOrLowest), key: peakOrLowest, past: sql`<` },
} as const;

interface CandidatesSlice {
  detectorRunId: string;
  filters: CandidateFilters;
  sort: ListCandidatesQuery['sort'];
  after: RowPlace | null;
  limit: number;
}

export function selectCandidates(db: Reader, slice: CandidatesSlice): CandidateRow[] {
  const { detectorRunId, filters, sort, after, limit } = slice;
  const { by, past, key } = orders[sort];
  const rest = after
    ? sql`(${key} ${past} ${after.key} or (${key} = ${after.key} and ${candidates.ordinal} > ${Number(after.id)}))`
    : undefined;
  return db
    .select()
    .from(candidates)
    .where(and(matching(detectorRunId, filters), rest))
    .orderBy(by, asc(candidates.ordinal))
    .limit(limit)
    .all();
}

export function placeOfCandidate(row: CandidateRow, sort: ListCandidatesQuery['sort']): RowPlace {
  const key = sort === 'onset' ? row.onsetSample : (row.peakDb ?? unknownPeakDb);
  return { key, id: String(row.ordinal) };
}

/** Counts one row further than is told, so that "more than" is known. */
export function countCandidates(db: Reader, detectorRunId: string, filters: CandidateFilters): number {
  const limited = db
    .select({ one: sql`1`.as('one') })
    .from(candidates)
    .where(matching(detectorRunId, filters))
    .limit(countLimit + 1)
    .as('limited');
  return (
    db
      .select({ count: sql<number>`count(*)` })
      .from(limited)
      .get()?.count ?? 0
  );
}
