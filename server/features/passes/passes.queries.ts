import { and, count, desc, eq, inArray, isNull, lt, ne, sql, type SQL } from 'drizzle-orm';
import type { PassState } from '../../../shared/contract/passes.ts';
import type { Reader } from '../../db/client.ts';
import { events, passes } from '../../db/schema/events.ts';
import { recordings } from '../../db/schema/recordings.ts';
import { runs } from '../../db/schema/runs.ts';
import { serviceRoles, users } from '../../db/schema/users.ts';

export type PassRow = typeof passes.$inferSelect;
export type PassWithContext = ReturnType<typeof selectPasses>[number];

const eventCount = sql<number>`(select count(*) from ${events} where ${events.passId} = ${passes.id} and ${isNull(events.deletedAtMs)})`;

const withContext = {
  pass: passes,
  fileName: recordings.fileName,
  frames: sql<number>`json_extract(${recordings.format}, '$.frames')`,
  sampleRateHz: sql<number>`json_extract(${recordings.format}, '$.sampleRateHz')`,
  sharing: recordings.sharing,
  runTitle: runs.title,
  labelerName: users.name,
  eventCount,
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
}

function matching({ visible, recordingId, labelerId, state }: PassFilter): SQL | undefined {
  return and(
    visible,
    recordingId ? eq(passes.recordingId, recordingId) : undefined,
    labelerId ? eq(passes.labelerId, labelerId) : undefined,
    state ? eq(passes.state, state) : undefined,
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

/** Whether this person has a pass here that counts: assigned or finished. */
export function selectPassOf(db: Reader, recordingId: string, labelerId: string): PassRow | undefined {
  return db
    .select()
    .from(passes)
    .where(
      and(
        eq(passes.recordingId, recordingId),
        eq(passes.labelerId, labelerId),
        inArray(passes.state, ['assigned', 'finished']),
      ),
    )
    .orderBy(passes.state)
    .limit(1)
    .get();
}

export function selectOpenBlindPass(db: Reader, recordingId: string, labelerId: string): PassRow | undefined {
  return db
    .select()
    .from(passes)
    .where(
      and(
        eq(passes.recordingId, recordingId),
        eq(passes.labelerId, labelerId),
        eq(passes.state, 'assigned'),
        eq(passes.blind, true),
      ),
    )
    .get();
}

/** Whether any recording of the run is marked blind by this person at the moment. */
export function selectIsRunBlind(db: Reader, runId: string, labelerId: string): boolean {
  const row = db
    .select({ id: passes.id })
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .where(
      and(
        eq(recordings.runId, runId),
        eq(passes.labelerId, labelerId),
        eq(passes.state, 'assigned'),
        eq(passes.blind, true),
      ),
    )
    .limit(1)
    .get();
  return row !== undefined;
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
