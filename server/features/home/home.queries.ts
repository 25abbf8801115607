import { and, asc, count, desc, eq, inArray, lt, sql, type SQL } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { collections, releases } from '../../db/schema/collections.ts';
import { passes } from '../../db/schema/events.ts';
import { detectorRuns } from '../../db/schema/measurements.ts';
import { recordings } from '../../db/schema/recordings.ts';
import { runs } from '../../db/schema/runs.ts';
import { uploads } from '../../db/schema/uploads.ts';
import { users } from '../../db/schema/users.ts';

const shown = 10;

/** Of the newest run of the detector: what a pass of rounds has to offer. */
const candidateCount = sql<number | null>`(
  select ${detectorRuns.candidateCount} from ${detectorRuns} where ${detectorRuns.recordingId} = ${passes.recordingId}
  order by ${detectorRuns.createdAtMs} desc, ${detectorRuns.id} desc limit 1
)`;

export interface Waiting<Row> {
  total: number;
  rows: Row[];
}

export interface RecordingRowOfHome {
  id: string;
  fileName: string;
  runTitle: string;
  processing: string;
  failure: string | null;
  atMs: number | null;
}

function selectRecordings(db: Reader, where: SQL | undefined, order: SQL): Waiting<RecordingRowOfHome> {
  const { id, fileName, processing, failure } = recordings;
  const atMs = sql<number | null>`coalesce(${recordings.heldAtMs}, ${recordings.createdAtMs})`;
  const rows = db
    .select({ id, fileName, processing, failure, runTitle: runs.title, atMs })
    .from(recordings)
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .where(where)
    .orderBy(order)
    .limit(shown)
    .all();
  const total = db.select({ count: count() }).from(recordings).where(where).get()?.count ?? 0;
  return { total, rows };
}

/** Uploads of this person whose bytes have not all arrived. */
export function selectOpenUploads(db: Reader, ownerId: string) {
  const where = and(eq(uploads.ownerId, ownerId), eq(uploads.state, 'open'));
  const rows = db
    .select({
      id: uploads.id,
      fileName: uploads.fileName,
      runId: uploads.runId,
      runTitle: runs.title,
      atMs: uploads.createdAtMs,
    })
    .from(uploads)
    .innerJoin(runs, eq(runs.id, uploads.runId))
    .where(where)
    .orderBy(desc(uploads.createdAtMs))
    .limit(shown)
    .all();
  return { total: db.select({ count: count() }).from(uploads).where(where).get()?.count ?? 0, rows };
}

export function selectInMeasuring(db: Reader, personId: string): Waiting<RecordingRowOfHome> {
  const where = and(
    eq(recordings.uploadedById, personId),
    inArray(recordings.processing, ['queued', 'measuring']),
  );
  return selectRecordings(db, where, desc(recordings.createdAtMs));
}

export function selectFailed(db: Reader, labIds: readonly string[]): Waiting<RecordingRowOfHome> {
  const where = and(inArray(recordings.labId, [...labIds]), eq(recordings.processing, 'failed'));
  return selectRecordings(db, where, desc(recordings.createdAtMs));
}

export function selectOwnHeld(db: Reader, personId: string): Waiting<RecordingRowOfHome> {
  const where = and(eq(recordings.uploadedById, personId), eq(recordings.sharing, 'held'));
  return selectRecordings(db, where, asc(recordings.heldAtMs));
}

/** Held recordings on which this person may decide. */
export function selectToDecide(db: Reader, decidable: SQL, personId: string): Waiting<RecordingRowOfHome> {
  const where = and(
    decidable,
    eq(recordings.sharing, 'held'),
    sql`${recordings.uploadedById} <> ${personId}`,
  );
  return selectRecordings(db, where, asc(recordings.heldAtMs));
}

/** Shared, measured recordings that nobody has been asked to mark. */
export function selectUnassigned(db: Reader): Waiting<RecordingRowOfHome> {
  const hasPass = sql`exists (select 1 from ${passes} where ${passes.recordingId} = ${recordings.id} and ${passes.state} <> 'cancelled')`;
  const where = and(
    eq(recordings.sharing, 'shared'),
    eq(recordings.processing, 'measured'),
    sql`not ${hasPass}`,
  );
  return selectRecordings(db, where, desc(recordings.createdAtMs));
}

const isOpenPass = and(eq(passes.state, 'assigned'), eq(recordings.sharing, 'shared'));

function selectPasses(db: Reader, where: SQL | undefined) {
  const { format } = recordings;
  const rows = db
    .select({
      id: passes.id,
      recordingId: passes.recordingId,
      fileName: recordings.fileName,
      runTitle: runs.title,
      labelerName: users.name,
      pass: passes,
      frames: sql<number>`json_extract(${format}, '$.frames')`,
      sampleRateHz: sql<number>`json_extract(${format}, '$.sampleRateHz')`,
      channels: sql<number>`json_extract(${format}, '$.channels')`,
      candidateCount,
    })
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .innerJoin(users, eq(users.id, passes.labelerId))
    .where(where)
    .orderBy(sql`${passes.dueAtMs} is null`, asc(passes.dueAtMs), asc(passes.id))
    .limit(shown)
    .all();
  const counted = db
    .select({ count: count() })
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .where(where)
    .get();
  return { total: counted?.count ?? 0, rows };
}
export type PassRowOfHome = ReturnType<typeof selectPasses>['rows'][number];

/** Due first. */
export function selectOpenPasses(db: Reader, labelerId: string) {
  return selectPasses(db, and(isOpenPass, eq(passes.labelerId, labelerId)));
}

export function selectOverduePasses(db: Reader, nowMs: number) {
  return selectPasses(db, and(isOpenPass, lt(passes.dueAtMs, nowMs)));
}

export function selectInPreparation(db: Reader) {
  const where = inArray(releases.state, ['building', 'built', 'failed']);
  const rows = db
    .select({
      id: releases.id,
      title: collections.title,
      version: releases.version,
      state: releases.state,
      atMs: releases.createdAtMs,
    })
    .from(releases)
    .innerJoin(collections, eq(collections.id, releases.collectionId))
    .where(where)
    .orderBy(desc(releases.id))
    .limit(shown)
    .all();
  return { total: db.select({ count: count() }).from(releases).where(where).get()?.count ?? 0, rows };
}
