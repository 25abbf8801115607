import { and, asc, count, eq, gte, inArray, isNull, lt, or, sql, type SQL } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { candidateVerdicts, events } from '../../db/schema/events.ts';
import { candidates, detectorRuns } from '../../db/schema/measurements.ts';

export type VerdictRow = typeof candidateVerdicts.$inferSelect;
export type AnsweredCandidate = typeof candidates.$inferSelect;
export type DetectorRunRow = typeof detectorRuns.$inferSelect;

/** Candidates of a run by their ordinals; `to` is exclusive. */
interface OrdinalRange {
  detectorRunId: string;
  from: number;
  to: number;
}

function within({ detectorRunId, from, to }: OrdinalRange): SQL | undefined {
  return and(
    eq(candidates.detectorRunId, detectorRunId),
    gte(candidates.ordinal, from),
    lt(candidates.ordinal, to),
  );
}

export type FactColumn = 'snrDb' | 'peakFrequencyHz' | 'durationUs' | 'ultrasonicShare' | 'shareAcross';
export type ParameterName = 'centroidHz' | 'averageFrequencyHz' | 'riseTimeUs' | 'counts';

const shareAcross = sql`case ${candidates.hearingClass} when 'across' then ${candidates.ultrasonicShare} end`;
const factColumns = {
  snrDb: sql`${candidates.snrDb}`,
  peakFrequencyHz: sql`${candidates.peakFrequencyHz}`,
  durationUs: sql`${candidates.durationUs}`,
  ultrasonicShare: sql`${candidates.ultrasonicShare}`,
  shareAcross,
} satisfies Record<FactColumn, SQL>;

function valueOf(name: FactColumn | ParameterName): SQL {
  const column = name in factColumns ? factColumns[name as FactColumn] : undefined;
  return column ?? sql`json_extract(${candidates.parameters}, ${`$.${name}`})`;
}

/** By ordinal, as columns: made into text by SQLite and parsed once, many rows are read several times quicker. */
export function selectFacts<Name extends FactColumn | ParameterName>(
  db: Reader,
  range: OrdinalRange,
  names: readonly Name[],
): Record<Name, (number | null)[]> {
  const values = Object.fromEntries(names.map((name) => [name, valueOf(name).as(name)]));
  const found = db
    .select(values)
    .from(candidates)
    .where(within(range))
    .orderBy(asc(candidates.ordinal))
    .as('found');
  const columns = Object.fromEntries(
    names.map((name) => [name, sql<string>`json_group_array(${sql.identifier(name)})`]),
  );
  const row = db.select(columns).from(found).get() as Record<Name, string> | undefined;
  return Object.fromEntries(
    names.map((name) => [name, JSON.parse(row?.[name] ?? '[]') as (number | null)[]]),
  ) as Record<Name, (number | null)[]>;
}

export function selectCandidatesByIds(db: Reader, ids: readonly string[]) {
  return db
    .select({ candidate: candidates, recordingId: detectorRuns.recordingId })
    .from(candidates)
    .innerJoin(detectorRuns, eq(detectorRuns.id, candidates.detectorRunId))
    .where(inArray(candidates.id, [...ids]))
    .all();
}

export function selectCandidatesAt(
  db: Reader,
  detectorRunId: string,
  ordinals: readonly number[],
): AnsweredCandidate[] {
  return db
    .select()
    .from(candidates)
    .where(and(eq(candidates.detectorRunId, detectorRunId), inArray(candidates.ordinal, [...ordinals])))
    .all();
}

/** The run of the detector whose candidates the pass has begun to answer. */
export function selectRunOfPass(db: Reader, passId: string): DetectorRunRow | undefined {
  return db
    .select({ run: detectorRuns })
    .from(candidateVerdicts)
    .innerJoin(candidates, eq(candidates.id, candidateVerdicts.candidateId))
    .innerJoin(detectorRuns, eq(detectorRuns.id, candidates.detectorRunId))
    .where(eq(candidateVerdicts.passId, passId))
    .limit(1)
    .get()?.run;
}

/** An answer whose mark was deleted by hand counts no more. */
const stillCounts = or(isNull(candidateVerdicts.eventId), isNull(events.deletedAtMs));

/** By how many verdicts of each kind the pass has got. */
export function countVerdicts(db: Reader, passId: string) {
  return db
    .select({ verdict: candidateVerdicts.verdict, count: count() })
    .from(candidateVerdicts)
    .leftJoin(events, eq(events.id, candidateVerdicts.eventId))
    .where(and(eq(candidateVerdicts.passId, passId), stillCounts))
    .groupBy(candidateVerdicts.verdict)
    .all();
}

export function selectAnsweredOrdinals(db: Reader, passId: string): number[] {
  const row = db
    .select({ ordinals: sql<string>`json_group_array(${candidates.ordinal})` })
    .from(candidateVerdicts)
    .innerJoin(candidates, eq(candidates.id, candidateVerdicts.candidateId))
    .leftJoin(events, eq(events.id, candidateVerdicts.eventId))
    .where(and(eq(candidateVerdicts.passId, passId), stillCounts))
    .get();
  return JSON.parse(row?.ordinals ?? '[]') as number[];
}

export function selectVerdicts(db: Reader, passId: string, candidateIds: readonly string[]): VerdictRow[] {
  return db
    .select()
    .from(candidateVerdicts)
    .where(
      and(eq(candidateVerdicts.passId, passId), inArray(candidateVerdicts.candidateId, [...candidateIds])),
    )
    .all();
}

export function selectVerdictById(db: Reader, id: string): VerdictRow | undefined {
  return db.select().from(candidateVerdicts).where(eq(candidateVerdicts.id, id)).get();
}

export function insertVerdict(db: Reader, row: VerdictRow): void {
  db.insert(candidateVerdicts).values(row).run();
}

export function updateVerdict(db: Reader, { id, ...values }: VerdictRow): void {
  db.update(candidateVerdicts).set(values).where(eq(candidateVerdicts.id, id)).run();
}

export function deleteVerdict(db: Reader, id: string): void {
  db.delete(candidateVerdicts).where(eq(candidateVerdicts.id, id)).run();
}
