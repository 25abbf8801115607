import { and, asc, eq, gte, inArray, lte } from 'drizzle-orm';
import type { CoverageWay } from '../../../shared/contract/passes.ts';
import type { SampleSpan } from '../../../shared/domain/event-span.ts';
import type { Reader } from '../../db/client.ts';
import { coverageSpans } from '../../db/schema/events.ts';

export type CoverageRow = typeof coverageSpans.$inferSelect;

/** What belongs together: spans of one way, channel and detail. */
export interface CoverageLane {
  passId: string;
  way: CoverageWay;
  channel: number;
  detail: number;
}

/** Those that overlap or touch the span. */
export function selectTouching(db: Reader, lane: CoverageLane, span: SampleSpan): CoverageRow[] {
  return db
    .select()
    .from(coverageSpans)
    .where(
      and(
        eq(coverageSpans.passId, lane.passId),
        eq(coverageSpans.way, lane.way),
        eq(coverageSpans.channel, lane.channel),
        eq(coverageSpans.detail, lane.detail),
        lte(coverageSpans.startSample, span.endSample),
        gte(coverageSpans.endSample, span.startSample),
      ),
    )
    .orderBy(asc(coverageSpans.startSample))
    .all();
}

export function selectCoverage(db: Reader, passId: string): CoverageRow[] {
  return db
    .select()
    .from(coverageSpans)
    .where(eq(coverageSpans.passId, passId))
    .orderBy(asc(coverageSpans.startSample))
    .all();
}

export function deleteCoverage(db: Reader, ids: string[]): void {
  if (ids.length > 0) db.delete(coverageSpans).where(inArray(coverageSpans.id, ids)).run();
}

export function insertCoverage(db: Reader, row: typeof coverageSpans.$inferInsert): void {
  db.insert(coverageSpans).values(row).run();
}
