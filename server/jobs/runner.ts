import type { Logger } from 'pino';
import { leaseMs, type ClaimedJob, type JobQueue, type ParkedJob } from './queue.ts';
import { HopelessJobError, JobLostError, type JobContext, type JobHandler } from './registry.ts';

interface RunnerParts {
  queue: JobQueue;
  handlers: readonly JobHandler[];
  log: Logger;
  /** Jobs of a lane that run at once. */
  lanes: Record<JobHandler['lane'], number>;
}

export interface JobRunner {
  start(): void;
  /** Stops claiming, asks running handlers to end, and gives back what did not finish in time. */
  stop(graceMs: number): Promise<void>;
  /** Runs what is due, one after the other, until nothing is left; for tests and commands. */
  runUntilIdle(): Promise<number>;
}

const pollMs = 1000;

export function createJobRunner({ queue, handlers, log, lanes }: RunnerParts): JobRunner {
  const handlerByKind = new Map(handlers.map((handler) => [handler.kind, handler]));
  const running = new Map<ClaimedJob, { handler: JobHandler; done: Promise<void>; abort: AbortController }>();
  let timer: NodeJS.Timeout | null = null;

  function claimableKinds(): string[] {
    const busy = (lane: JobHandler['lane']) =>
      [...running.values()].filter(({ handler }) => handler.lane === lane).length;
    return handlers.filter(({ lane }) => busy(lane) < lanes[lane]).map(({ kind }) => kind);
  }

  function launch(job: ClaimedJob): Promise<void> {
    const handler = handlerByKind.get(job.kind);
    if (handler === undefined) throw new RangeError(`No handler for jobs of kind ${job.kind}.`);
    const abort = new AbortController();
    const done = runJob({ job, handler, queue, log, abort }).finally(() => running.delete(job));
    running.set(job, { handler, done, abort });
    return done;
  }

  function fill(): void {
    try {
      for (const parked of queue.parkExhausted()) tellParked(handlerByKind.get(parked.kind), parked, log);
      for (let job = queue.claim(claimableKinds()); job !== null; job = queue.claim(claimableKinds())) {
        void launch(job).finally(() => timer !== null && fill());
      }
    } catch (error) {
      log.error({ err: error }, 'claiming a job failed');
    }
  }

  async function runUntilIdle(): Promise<number> {
    const kinds = handlers.map(({ kind }) => kind);
    let count = 0;
    for (let job = queue.claim(kinds); job !== null; job = queue.claim(kinds)) {
      await launch(job);
      count += 1;
    }
    return count;
  }

  async function stop(graceMs: number): Promise<void> {
    if (timer !== null) clearInterval(timer);
    timer = null;
    for (const { abort } of running.values()) abort.abort();
    const finished = Promise.allSettled([...running.values()].map(({ done }) => done));
    await Promise.race([finished, new Promise((resolve) => setTimeout(resolve, graceMs).unref())]);
    for (const job of running.keys()) queue.release(job);
  }

  queue.onEnqueued(() => timer !== null && fill());
  return {
    runUntilIdle,
    stop,
    start: () => {
      timer ??= setInterval(fill, pollMs);
      fill();
    },
  };
}

interface Run {
  job: ClaimedJob;
  handler: JobHandler;
  queue: JobQueue;
  log: Logger;
  abort: AbortController;
}

async function runJob(run: Run): Promise<void> {
  const { job, handler, queue, abort } = run;
  const beat = setInterval(() => keep(run), leaseMs / 3);
  try {
    await handler.run(job.payload, contextOf(run));
    queue.complete(job);
  } catch (error) {
    settleFailure(run, error);
  } finally {
    clearInterval(beat);
    abort.abort();
  }
}

function contextOf(run: Run): JobContext {
  return {
    signal: run.abort.signal,
    attempt: run.job.attempts,
    progress: (fraction) => keep(run, Math.min(1, Math.max(0, fraction))),
    assertHeld: (tx) => {
      if (!run.queue.holds(tx, run.job)) throw new JobLostError();
    },
  };
}

function keep({ queue, job, abort }: Run, progress?: number): void {
  if (!queue.heartbeat(job, progress)) abort.abort();
}

function settleFailure({ job, handler, queue, log, abort }: Run, error: unknown): void {
  // An abort from outside is a stop or a lost lease, never a fault of the job.
  if (abort.signal.aborted) return queue.release(job);
  const reason = error instanceof Error ? error.message : String(error);
  const outcome = queue.fail(job, reason, error instanceof HopelessJobError ? 'never' : 'again');
  log.warn({ err: error, jobId: job.id, kind: job.kind, attempts: job.attempts, outcome }, 'job failed');
  if (outcome === 'parked') tellParked(handler, { ...job, reason }, log);
}

function tellParked(handler: JobHandler | undefined, job: ParkedJob, log: Logger): void {
  try {
    handler?.onParked(job.payload, job.reason);
  } catch (error) {
    log.error({ err: error, jobId: job.id }, 'telling that a job was parked failed');
  }
}
