import { and, asc, desc, eq, gt, gte, inArray, lt, lte, sql, type SQL } from 'drizzle-orm';
import type {
  CandidateFilters,
  CandidateSortKey,
  HearingClass,
} from '../../../shared/contract/candidates.ts';
import type { Reader } from '../../db/client.ts';
import { candidates, detectorRuns } from '../../db/schema/measurements.ts';

export type CandidateRow = typeof candidates.$inferSelect;
export type DetectorRunRow = typeof detectorRuns.$inferSelect;

/** Candidates of one run by their ordinals; `to` is exclusive. */
export interface OrdinalRange {
  detectorRunId: string;
  from: number;
  to: number;
}

export function selectNewestDetectorRun(db: Reader, measurementId: string): DetectorRunRow | undefined {
  return db
    .select()
    .from(detectorRuns)
    .where(eq(detectorRuns.measurementId, measurementId))
    .orderBy(desc(detectorRuns.createdAtMs), desc(detectorRuns.id))
    .limit(1)
    .get();
}

function within({ detectorRunId, from, to }: OrdinalRange): SQL | undefined {
  return and(
    eq(candidates.detectorRunId, detectorRunId),
    gte(candidates.ordinal, from),
    lt(candidates.ordinal, to),
  );
}

/** A candidate belongs to a window when any part of it lies inside; both ends are exclusive. */
function matching(filters: CandidateFilters): SQL | undefined {
  const { channel, hearingClass, leastSnrDb, lowHz, highHz, startSample, endSample } = filters;
  return and(
    channel === undefined ? undefined : eq(candidates.channel, channel),
    hearingClass === undefined ? undefined : eq(candidates.hearingClass, hearingClass),
    leastSnrDb === undefined ? undefined : gte(candidates.snrDb, leastSnrDb),
    lowHz === undefined ? undefined : gte(candidates.peakFrequencyHz, lowHz),
    highHz === undefined ? undefined : lte(candidates.peakFrequencyHz, highHz),
    startSample === undefined ? undefined : gt(candidates.endSample, startSample),
    endSample === undefined ? undefined : lt(candidates.onsetSample, endSample),
  );
}

const rankOfClass = sql`case ${candidates.hearingClass} when 'below' then 0 when 'across' then 1 when 'above' then 2 end`;

const sortColumns = {
  onset: candidates.ordinal,
  snrDb: candidates.snrDb,
  peakDb: candidates.peakDb,
  peakFrequencyHz: candidates.peakFrequencyHz,
  durationUs: candidates.durationUs,
  energyFs2S: candidates.energyFs2S,
  ultrasonicShare: candidates.ultrasonicShare,
  hearingClass: rankOfClass,
} as const satisfies Record<CandidateSortKey, unknown>;

/** By onset, as columns: made into text by SQLite and parsed once, many rows are read several times quicker. */
export function selectSortValues(
  db: Reader,
  range: OrdinalRange,
  filters: CandidateFilters,
  key: CandidateSortKey,
): { ordinals: number[]; values: (number | null)[] } {
  const value = sql<number | null>`${sortColumns[key]}`.as('value');
  const found = db
    .select({ ordinal: candidates.ordinal, value })
    .from(candidates)
    .where(and(within(range), matching(filters)))
    .orderBy(asc(candidates.ordinal))
    .as('found');
  const columns = db
    .select({
      ordinals: sql<string>`json_group_array(${found.ordinal})`,
      values: sql<string>`json_group_array(${found.value})`,
    })
    .from(found)
    .get();
  return {
    ordinals: JSON.parse(columns?.ordinals ?? '[]') as number[],
    values: JSON.parse(columns?.values ?? '[]') as (number | null)[],
  };
}

interface StepGrid {
  startSample: number;
  samplesPerStep: number;
  steps: number;
}

export interface StepCount {
  hearingClass: HearingClass;
  step: number;
  count: number;
}

/** How many of each class have their onset in each of the steps; one that began before the first counts there. */
export function countBySteps(
  db: Reader,
  range: OrdinalRange,
  filters: CandidateFilters,
  { startSample, samplesPerStep, steps }: StepGrid,
): StepCount[] {
  const wanted = sql`(${candidates.onsetSample} - ${startSample}) / ${samplesPerStep}`;
  const step = sql<number>`cast(max(0, min(${steps - 1}, ${wanted})) as integer)`.as('step');
  return db
    .select({ hearingClass: candidates.hearingClass, step, count: sql<number>`count(*)` })
    .from(candidates)
    .where(and(within(range), matching(filters)))
    .groupBy(candidates.hearingClass, sql`step`)
    .all();
}

export function selectCandidatesAt(
  db: Reader,
  detectorRunId: string,
  ordinals: readonly number[],
): CandidateRow[] {
  return db
    .select()
    .from(candidates)
    .where(and(eq(candidates.detectorRunId, detectorRunId), inArray(candidates.ordinal, [...ordinals])))
    .all();
}

/** By onset. */
export function selectCandidatesWithin(
  db: Reader,
  range: OrdinalRange,
  filters: CandidateFilters,
): CandidateRow[] {
  return db
    .select()
    .from(candidates)
    .where(and(within(range), matching(filters)))
    .orderBy(asc(candidates.ordinal))
    .all();
}
