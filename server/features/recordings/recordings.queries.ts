import { and, desc, eq, inArray, isNotNull, isNull, lt, or, sql, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import { countLimit } from '../../../shared/contract/page.ts';
import type { ListRecordingsQuery, RecordingListItem } from '../../../shared/contract/recordings.ts';
import { areFindingsOpen } from '../../authorize/withheld.ts';
import type { Reader } from '../../db/client.ts';
import { containsText } from '../../db/like-pattern.ts';
import { prepared } from '../../db/prepared.ts';
import type { RowPlace } from '../../db/row-place.ts';
import { events, passes } from '../../db/schema/events.ts';
import { labs } from '../../db/schema/labs.ts';
import { detectorRuns, measurements } from '../../db/schema/measurements.ts';
import { recordingFindings, recordings } from '../../db/schema/recordings.ts';
import { runs } from '../../db/schema/runs.ts';
import { sensors, setups } from '../../db/schema/sensors.ts';
import { users } from '../../db/schema/users.ts';

export type RecordingRow = typeof recordings.$inferSelect;
export type FindingRow = typeof recordingFindings.$inferSelect;
export type MeasurementRow = typeof measurements.$inferSelect;

const newestMeasurement = alias(measurements, 'newest_measurement');
const newestDetectorRun = alias(detectorRuns, 'newest_detector_run');
const isNewestMeasurement = sql`${measurements.id} = (
  select ${newestMeasurement.id} from ${measurements} as ${newestMeasurement} where ${newestMeasurement.recordingId} = ${recordings.id}
  order by ${newestMeasurement.createdAtMs} desc, ${newestMeasurement.id} desc limit 1
) and ${recordings.processing} = 'measured'`;
const isNewestDetectorRun = sql`${detectorRuns.id} = (
  select ${newestDetectorRun.id} from ${detectorRuns} as ${newestDetectorRun} where ${newestDetectorRun.measurementId} = ${measurements.id}
  order by ${newestDetectorRun.createdAtMs} desc, ${newestDetectorRun.id} desc limit 1
)`;
const ultrasonicVerdict = sql<
  RecordingListItem['ultrasonicVerdict']
>`json_extract(${measurements.summary}, '$.ultrasonic.verdict')`;

const listColumns = {
  recording: recordings,
  runTitle: runs.title,
  material: runs.material,
  labName: labs.name,
  ultrasonicVerdict,
  candidateCount: detectorRuns.candidateCount,
};

export interface RecordingListView {
  recording: RecordingRow;
  runTitle: string;
  material: string;
  labName: string;
  ultrasonicVerdict: RecordingListItem['ultrasonicVerdict'];
  candidateCount: number | null;
}
export interface RecordingView extends RecordingListView {
  setup: typeof setups.$inferSelect;
  sensor: typeof sensors.$inferSelect;
  uploadedByName: string | null;
}

export type RecordingFilters = Omit<ListRecordingsQuery, 'cursor' | 'limit'> & {
  ids?: readonly string[];
  material?: string | undefined;
  /** Who asks: what is withheld from them, they cannot find by it either. */
  askedById: string;
};

function matching(filters: RecordingFilters, visible: SQL): SQL | undefined {
  const { ids, q, runId, labId, material, processing, sharing } = filters;
  return and(
    visible,
    q
      ? or(
          ...[recordings.fileName, runs.title, runs.material, labs.name].map((text) => containsText(text, q)),
        )
      : undefined,
    ids ? inArray(recordings.id, [...ids]) : undefined,
    material ? containsText(runs.material, material) : undefined,
    runId ? eq(recordings.runId, runId) : undefined,
    labId ? eq(recordings.labId, labId) : undefined,
    processing ? eq(recordings.processing, processing) : undefined,
    sharing ? eq(recordings.sharing, sharing) : undefined,
    ofVerdict(filters),
  );
}

function ofVerdict({ ultrasonicVerdict: verdict, askedById }: RecordingFilters): SQL | undefined {
  if (verdict === undefined) return undefined;
  const isOf = sql`${ultrasonicVerdict} = ${verdict}`;
  if (verdict === 'not-observable') return isOf;
  return and(isOf, areFindingsOpen(askedById));
}

interface RecordingsSlice {
  filters: RecordingFilters;
  visible: SQL;
  after: RowPlace | null;
  limit: number;
}

/** Newest first. */
export function selectRecordings(
  db: Reader,
  { filters, visible, after, limit }: RecordingsSlice,
): RecordingListView[] {
  const { createdAtMs, id } = recordings;
  const rest = after
    ? or(lt(createdAtMs, Number(after.key)), and(eq(createdAtMs, Number(after.key)), lt(id, after.id)))
    : undefined;
  return db
    .select(listColumns)
    .from(recordings)
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .innerJoin(labs, eq(labs.id, recordings.labId))
    .leftJoin(measurements, isNewestMeasurement)
    .leftJoin(detectorRuns, isNewestDetectorRun)
    .where(and(matching(filters, visible), rest))
    .orderBy(desc(createdAtMs), desc(id))
    .limit(limit)
    .all();
}

/** Counts one row further than is told, so that "more than" is known. */
export function countRecordings(db: Reader, filters: RecordingFilters, visible: SQL): number {
  const limited = db
    .select({ one: sql`1`.as('one') })
    .from(recordings)
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .innerJoin(labs, eq(labs.id, recordings.labId))
    .leftJoin(measurements, isNewestMeasurement)
    .where(matching(filters, visible))
    .limit(countLimit + 1)
    .as('limited');
  return (
    db
      .select({ count: sql<number>`count(*)` })
      .from(limited)
      .get()?.count ?? 0
  );
}

export function selectRecording(db: Reader, id: string, visible: SQL): RecordingView | undefined {
  return db
    .select({ ...listColumns, setup: setups, sensor: sensors, uploadedByName: users.name })
    .from(recordings)
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .innerJoin(labs, eq(labs.id, recordings.labId))
    .innerJoin(setups, eq(setups.id, recordings.setupId))
    .innerJoin(sensors, eq(sensors.id, setups.sensorId))
    .leftJoin(users, eq(users.id, recordings.uploadedById))
    .leftJoin(measurements, isNewestMeasurement)
    .leftJoin(detectorRuns, isNewestDetectorRun)
    .where(and(eq(recordings.id, id), visible))
    .get();
}

export type MeasuredWith = NonNullable<ReturnType<typeof selectMeasuredWith>>;

const measuredWithById = prepared((db) =>
  db
    .select({ recording: recordings, setup: setups, sensor: sensors })
    .from(recordings)
    .innerJoin(setups, eq(setups.id, recordings.setupId))
    .innerJoin(sensors, eq(sensors.id, setups.sensorId))
    .where(eq(recordings.id, sql.placeholder('id')))
    .prepare(),
);

/** A recording and what it was recorded with, for the server's own work, which nobody's rights narrow. */
export function selectMeasuredWith(db: Reader, id: string) {
  return measuredWithById(db).get({ id });
}

export function requireRecording(db: Reader, id: string): RecordingRow {
  const row = selectRecordingRow(db, id);
  if (row === undefined) throw new RangeError(`There is no recording ${id}.`);
  return row;
}

export function selectRecordingRow(db: Reader, id: string, visible?: SQL): RecordingRow | undefined {
  return db
    .select()
    .from(recordings)
    .where(and(eq(recordings.id, id), visible))
    .get();
}

export function selectNewestMeasurement(db: Reader, recordingId: string): MeasurementRow | undefined {
  return db
    .select()
    .from(measurements)
    .where(and(eq(measurements.recordingId, recordingId), isNotNull(measurements.finishedAtMs)))
    .orderBy(desc(measurements.finishedAtMs), desc(measurements.id))
    .limit(1)
    .get();
}

/** Without the summary, which views do not need. */
export function selectNewestMeasurementId(db: Reader, recordingId: string): string | undefined {
  return db
    .select({ id: measurements.id })
    .from(measurements)
    .where(and(eq(measurements.recordingId, recordingId), isNotNull(measurements.finishedAtMs)))
    .orderBy(desc(measurements.finishedAtMs), desc(measurements.id))
    .limit(1)
    .get()?.id;
}

export function selectFindings(db: Reader, recordingId: string): FindingRow[] {
  return db
    .select()
    .from(recordingFindings)
    .where(eq(recordingFindings.recordingId, recordingId))
    .orderBy(recordingFindings.foundAtMs, recordingFindings.id)
    .all();
}

export function countEvents(db: Reader, recordingId: string): number {
  const isThere = and(eq(events.recordingId, recordingId), isNull(events.deletedAtMs));
  return (
    db
      .select({ count: sql<number>`count(*)` })
      .from(events)
      .where(isThere)
      .get()?.count ?? 0
  );
}

/** Whether this person has an open pass here in which events are marked. */
export function hasOpenEventsPass(db: Reader, labelerId: string, recordingId: string): boolean {
  const isOpen = and(
    eq(passes.recordingId, recordingId),
    eq(passes.labelerId, labelerId),
    eq(passes.state, 'assigned'),
    eq(passes.task, 'events'),
  );
  return db.select({ id: passes.id }).from(passes).where(isOpen).limit(1).get() !== undefined;
}

export function insertRecording(db: Reader, row: typeof recordings.$inferInsert): void {
  db.insert(recordings).values(row).run();
}

export function insertFindings(db: Reader, rows: (typeof recordingFindings.$inferInsert)[]): void {
  if (rows.length > 0) db.insert(recordingFindings).values(rows).run();
}

export function updateRecording(db: Reader, id: string, values: Partial<RecordingRow>): void {
  db.update(recordings)
    .set({ ...values, revision: sql`${recordings.revision} + 1` })
    .where(eq(recordings.id, id))
    .run();
}

/** Progress is no change that a revision counts. */
export function updateProgress(db: Reader, id: string, progress: number): void {
  db.update(recordings).set({ progress }).where(eq(recordings.id, id)).run();
}
