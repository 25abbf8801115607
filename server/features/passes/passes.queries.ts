import { and, count, desc, eq, isNull, lt, ne, sql, type SQL } from 'drizzle-orm';
import type { PassState } from '../../../shared/contract/passes.ts';
import type { Reader } from '../../db/client.ts';
import { prepared } from '../../db/prepared.ts';
import { candidateVerdicts, events, passes } from '../../db/schema/events.ts';
import { detectorRuns } from '../../db/schema/measurements.ts';
import { recordings } from '../../db/schema/recordings.ts';
import { runs } from '../../db/schema/runs.ts';
import { serviceRoles, users } from '../../db/schema/users.ts';

export type PassRow = typeof passes.$inferSelect;
export type PassWithContext = ReturnType<typeof selectPasses>[number];

const eventCount = sql<number>`(select count(*) from ${events} where ${events.passId} = ${passes.id} and ${isNull(events.deletedAtMs)})`;

/** Of the newest run of the detector. */
const candidateCount = sql<number | null>`(
  select ${detectorRuns.candidateCount} from ${detectorRuns} where ${detectorRuns.recordingId} = ${passes.recordingId}
  order by ${detectorRuns.createdAtMs} desc, ${detectorRuns.id} desc limit 1
)`;

const withContext = {
  pass: passes,
  fileName: recordings.fileName,
  frames: sql<number>`json_extract(${recordings.format}, '$.frames')`,
  sampleRateHz: sql<number>`json_extract(${recordings.format}, '$.sampleRateHz')`,
  channels: sql<number>`json_extract(${recordings.format}, '$.channels')`,
  sharing: recordings.sharing,
  runTitle: runs.title,
  labelerName: users.name,
  eventCount,
  candidateCount,
};

function fromPasses(db: Reader) {
  return db
    .select(withContext)
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .innerJoin(users, eq(users.id, passes.labelerId));
}

export interface PassFilter {
  /** What the asking person may see. */
  visible: SQL;
  recordingId: string | undefined;
  labelerId: string | undefined;
  state: PassState | undefined;
  /** Open passes that were due before this moment. */
  dueBeforeMs: number | undefined;
}

function matching({ visible, recordingId, labelerId, state, dueBeforeMs }: PassFilter): SQL | undefined {
  return and(
    visible,
    recordingId ? eq(passes.recordingId, recordingId) : undefined,
    labelerId ? eq(passes.labelerId, labelerId) : undefined,
    state ? eq(passes.state, state) : undefined,
    dueBeforeMs === undefined
      ? undefined
      : and(eq(passes.state, 'assigned'), lt(passes.dueAtMs, dueBeforeMs)),
  );
}

export function selectPasses(
  db: Reader,
  filter: PassFilter,
  page: { before: string | undefined; limit: number },
) {
  const position = page.before === undefined ? undefined : lt(passes.id, page.before);
  return fromPasses(db)
    .where(and(matching(filter), position))
    .orderBy(desc(passes.id))
    .limit(page.limit)
    .all();
}

export function countPasses(db: Reader, filter: PassFilter): number {
  const row = db
    .select({ total: count() })
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .where(matching(filter))
    .get();
  return row?.total ?? 0;
}

export function selectPassWithContext(db: Reader, id: string): PassWithContext | undefined {
  return fromPasses(db).where(eq(passes.id, id)).get();
}

const passAndSharingById = prepared((db) =>
  db
    .select({ pass: passes, sharing: recordings.sharing })
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .where(eq(passes.id, sql.placeholder('id')))
    .prepare(),
);

/** What is asked at each mark: the pass, and whether its recording is shared. */
export function selectPassAndSharing(db: Reader, id: string) {
  return passAndSharingById(db).get({ id });
}

function isOpenOf(labelerId: string): SQL | undefined {
  return and(eq(passes.labelerId, labelerId), eq(passes.state, 'assigned'));
}

/** The pass that this person has on the recording at the moment, if any. */
export function selectOpenPassOf(db: Reader, recordingId: string, labelerId: string): PassRow | undefined {
  return db
    .select()
    .from(passes)
    .where(and(eq(passes.recordingId, recordingId), isOpenOf(labelerId)))
    .limit(1)
    .get();
}

export function selectOpenBlindPass(db: Reader, recordingId: string, labelerId: string): PassRow | undefined {
  return db
    .select()
    .from(passes)
    .where(and(eq(passes.recordingId, recordingId), isOpenOf(labelerId), eq(passes.blind, true)))
    .get();
}

/** Passes that this person has open on any recording of the run. */
export function selectOpenPassesOnRun(db: Reader, runId: string, labelerId: string) {
  return db
    .select({ id: passes.id, task: passes.task, blind: passes.blind })
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .where(and(eq(recordings.runId, runId), isOpenOf(labelerId)))
    .all();
}

/** Candidates that were answered in a pass of rounds. */
export function countAnswered(db: Reader, passId: string): number {
  const ofPass = eq(candidateVerdicts.passId, passId);
  return db.select({ count: count() }).from(candidateVerdicts).where(ofPass).get()?.count ?? 0;
}

export function selectUncancelledPasses(db: Reader, recordingId: string): PassRow[] {
  return db
    .select()
    .from(passes)
    .where(and(eq(passes.recordingId, recordingId), ne(passes.state, 'cancelled')))
    .orderBy(passes.id)
    .all();
}

export function insertPass(db: Reader, row: typeof passes.$inferInsert): void {
  db.insert(passes).values(row).run();
}

export function updatePass(db: Reader, id: string, values: Partial<typeof passes.$inferInsert>): void {
  db.update(passes).set(values).where(eq(passes.id, id)).run();
}

export function selectPass(db: Reader, id: string): PassRow | undefined {
  return db.select().from(passes).where(eq(passes.id, id)).get();
}

/** What an assignment asks of the recording. */
export function selectAssignable(db: Reader, recordingId: string) {
  return db
    .select({
      id: recordings.id,
      runId: recordings.runId,
      format: recordings.format,
      labId: recordings.labId,
      sharing: recordings.sharing,
      processing: recordings.processing,
      uploadedById: recordings.uploadedById,
    })
    .from(recordings)
    .where(eq(recordings.id, recordingId))
    .get();
}

/** Enabled people with the role of a labeler, by name. */
export function selectLabelers(db: Reader) {
  return db
    .select({ id: users.id, name: users.name })
    .from(users)
    .innerJoin(serviceRoles, and(eq(serviceRoles.userId, users.id), eq(serviceRoles.role, 'labeler')))
    .where(eq(users.disabled, false))
    .orderBy(users.name, users.id)
    .all();
}
