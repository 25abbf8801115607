import { and, count, eq, gte, inArray, lt, lte, or, sql } from 'drizzle-orm';
import type { Db, Reader, Tx } from '../db/client.ts';
import { jobs } from '../db/schema/jobs.ts';
import { write } from '../db/transaction.ts';
import { retryDelayMs } from './retry-delay.ts';

export const maxAttempts = 5;
export const leaseMs = 60_000;

export interface JobRequest {
  kind: string;
  /** Ids only: the handler reads the rest when it runs. */
  payload: Record<string, unknown>;
  runAfterMs?: number;
}

export interface ClaimedJob {
  id: string;
  kind: string;
  payload: Record<string, unknown>;
  /** Grows with each claim; whoever holds an older number has lost the job. */
  fence: number;
  attempts: number;
}

export interface ParkedJob {
  id: string;
  kind: string;
  payload: Record<string, unknown>;
  reason: string;
}

export interface JobQueue {
  /** Writes the job in the transaction of its cause, and wakes the runner after it. */
  enqueue(tx: Reader, request: JobRequest): string;
  claim(kinds: readonly string[]): ClaimedJob | null;
  /** False where the job is no longer this claim's. */
  heartbeat(job: ClaimedJob, progress?: number): boolean;
  complete(job: ClaimedJob): boolean;
  /** Back to the queue with a growing delay, or parked with the reason after the fifth try. */
  fail(job: ClaimedJob, reason: string, outcome?: 'again' | 'never'): 'queued' | 'parked' | 'lost';
  /** Back to the queue untouched, where the process stops. */
  release(job: ClaimedJob): void;
  /** Parks what took the process down five times, and tells which. */
  parkExhausted(): ParkedJob[];
  retry(jobId: string): boolean;
  /** Takes jobs out of the queue in the transaction of its cause; one that runs is told to end at its next sign of life. */
  cancel(tx: Reader, request: JobRequest): boolean;
  holds(tx: Reader, job: ClaimedJob): boolean;
  counts(): { queued: number; running: number; parked: number };
  onEnqueued(wake: () => void): void;
}

interface QueueParts {
  db: Db;
  nowMs: () => number;
  nextId: () => string;
}

/** The queue in SQLite; one process works on it. */
export function createJobQueue({ db, nowMs, nextId }: QueueParts): JobQueue {
  const wakers = new Set<() => void>();

  function enqueue(tx: Reader, request: JobRequest): string {
    const id = nextId();
    const now = nowMs();
    const row = { id, kind: request.kind, payload: request.payload, runAfterMs: request.runAfterMs ?? now };
    tx.insert(jobs)
      .values({ ...row, state: 'queued', createdAtMs: now, updatedAtMs: now })
      .run();
    setImmediate(() => wakers.forEach((wake) => wake()));
    return id;
  }

  function claim(kinds: readonly string[]): ClaimedJob | null {
    if (kinds.length === 0) return null;
    return write(db, (tx) => claimNext(tx, kinds, nowMs()));
  }

  function update(job: ClaimedJob, values: Partial<typeof jobs.$inferInsert>): boolean {
    const changed = db
      .update(jobs)
      .set({ ...values, updatedAtMs: nowMs() })
      .where(isHeldBy(job))
      .run();
    return changed.changes === 1;
  }

  function fail(job: ClaimedJob, reason: string, outcome: 'again' | 'never' = 'again') {
    const parked = outcome === 'never' || job.attempts >= maxAttempts;
    const values = parked
      ? ({ state: 'parked' } as const)
      : ({ state: 'queued', runAfterMs: nowMs() + retryDelayMs(job.attempts) } as const);
    if (!update(job, { ...values, error: reason, leaseUntilMs: null })) return 'lost';
    return values.state;
  }

  return {
    enqueue,
    claim,
    fail,
    heartbeat: (job, progress) =>
      update(job, { leaseUntilMs: nowMs() + leaseMs, ...(progress === undefined ? {} : { progress }) }),
    complete: (job) => update(job, { state: 'done', progress: 1, error: null, leaseUntilMs: null }),
    release: (job) => {
      update(job, { state: 'queued', attempts: job.attempts - 1, runAfterMs: nowMs(), leaseUntilMs: null });
    },
    parkExhausted: () => parkExhausted(db, nowMs()),
    retry: (jobId) => retryParked(db, jobId, nowMs(), wakers),
    cancel: cancelWaiting,
    holds: (tx, job) => tx.select({ id: jobs.id }).from(jobs).where(isHeldBy(job)).get() !== undefined,
    counts: () => countByState(db),
    onEnqueued: (wake) => wakers.add(wake),
  };
}

/** A running job finds at its next sign of life that it is nobody's any more. */
function cancelWaiting(tx: Reader, { kind, payload }: JobRequest): boolean {
  const sameWork = and(
    eq(jobs.kind, kind),
    eq(jobs.payload, payload),
    inArray(jobs.state, ['queued', 'running']),
  );
  return tx.delete(jobs).where(sameWork).run().changes > 0;
}

function isHeldBy(job: ClaimedJob) {
  return and(eq(jobs.id, job.id), eq(jobs.fence, job.fence), eq(jobs.state, 'running'));
}

/** One conditional update, so that two claims can never take the same job. */
function claimNext(tx: Tx, kinds: readonly string[], now: number): ClaimedJob | null {
  const next = tx
    .select({ id: jobs.id })
    .from(jobs)
    .where(
      and(
        inArray(jobs.kind, [...kinds]),
        or(
          and(eq(jobs.state, 'queued'), lte(jobs.runAfterMs, now)),
          and(eq(jobs.state, 'running'), lt(jobs.leaseUntilMs, now), lt(jobs.attempts, maxAttempts)),
        ),
      ),
    )
    .orderBy(jobs.runAfterMs, jobs.id)
    .limit(1);
  const claimed = tx
    .update(jobs)
    .set({
      state: 'running',
      fence: sql`${jobs.fence} + 1`,
      attempts: sql`${jobs.attempts} + 1`,
      leaseUntilMs: now + leaseMs,
      updatedAtMs: now,
    })
    .where(eq(jobs.id, next))
    .returning({
      id: jobs.id,
      kind: jobs.kind,
      payload: jobs.payload,
      fence: jobs.fence,
      attempts: jobs.attempts,
    })
    .get();
  return claimed ?? null;
}

/** A job whose process died with it five times has never told a reason, so we give one. */
function parkExhausted(db: Db, now: number): ParkedJob[] {
  const reason = `The server stopped during each of ${maxAttempts} tries.`;
  return db
    .update(jobs)
    .set({ state: 'parked', leaseUntilMs: null, updatedAtMs: now, error: reason })
    .where(and(eq(jobs.state, 'running'), lt(jobs.leaseUntilMs, now), gte(jobs.attempts, maxAttempts)))
    .returning({ id: jobs.id, kind: jobs.kind, payload: jobs.payload })
    .all()
    .map((job) => ({ ...job, reason }));
}

function retryParked(db: Db, jobId: string, now: number, wakers: ReadonlySet<() => void>): boolean {
  const changed = db
    .update(jobs)
    .set({ state: 'queued', attempts: 0, error: null, progress: 0, runAfterMs: now, updatedAtMs: now })
    .where(and(eq(jobs.id, jobId), eq(jobs.state, 'parked')))
    .run();
  setImmediate(() => wakers.forEach((wake) => wake()));
  return changed.changes === 1;
}

function countByState(db: Db) {
  const rows = db
    .select({ state: jobs.state, count: count() })
    .from(jobs)
    .where(inArray(jobs.state, ['queued', 'running', 'parked']))
    .groupBy(jobs.state)
    .all();
  const of = (state: string) => rows.find((row) => row.state === state)?.count ?? 0;
  return { queued: of('queued'), running: of('running'), parked: of('parked') };
}
