import { rmSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { z } from 'zod';
import type { Bench, BenchRow, RowFamily } from '../kit/bench.ts';
import { megabytes, short } from '../kit/figures.ts';
import { ultrasonicRecording, type MadeRecording } from '../kit/recordings.ts';
import { ServerVisit } from '../kit/server-visit.ts';

const MOST_MS = 100;
const MOST_SERVER_MB = 400;
const SMALL_REQUESTS = ['/api/health', '/api/recordings?limit=20'] as const;
const BETWEEN_REQUESTS_MS = 25;
const stateSchema = z.object({ processing: z.string(), failure: z.string().nullable() });

export const server: RowFamily = {
  name: 'server',
  about: 'small requests while two large recordings are measured',
  async run(bench) {
    const recordings = (bench.isQuick ? [1, 0.9] : [10, 9.9]).map((segments) =>
      ultrasonicRecording(bench, segments),
    );
    return [...(await whileMeasuring(bench, recordings, 1)), ...(await whileMeasuring(bench, recordings, 2))];
  },
};

async function whileMeasuring(
  bench: Bench,
  recordings: MadeRecording[],
  workers: number,
): Promise<BenchRow[]> {
  const dataDir = join(bench.folder, `server-${workers}`);
  const visit = await ServerVisit.begin(dataDir, { RECALESCE_MEASURE_WORKERS: String(workers) });
  try {
    const idle = await timesOfRequests(visit, wait(3000));
    const ids: string[] = [];
    for (const recording of recordings) ids.push(await visit.bringIn(recording));
    const busy = await timesOfRequests(visit, untilMeasured(visit, ids, bench.isQuick ? 30_000 : 120_000));
    const threads = workers === 1 ? 'one worker' : 'two workers';
    return [latencyRow(threads, busy, idle), memoryRow(threads, visit.peakMb())];
  } finally {
    await visit.end();
    rmSync(dataDir, { recursive: true, force: true });
  }
}

/** Milliseconds of each small request until something is over. */
async function timesOfRequests(visit: ServerVisit, over: Promise<unknown>): Promise<number[]> {
  const times: number[] = [];
  let isOver = false;
  const ended = over.finally(() => (isOver = true));
  while (!isOver) {
    for (const route of SMALL_REQUESTS) {
      const startedMs = performance.now();
      await (await visit.send('GET', route)).arrayBuffer();
      times.push(performance.now() - startedMs);
    }
    await wait(BETWEEN_REQUESTS_MS);
  }
  await ended;
  return times;
}

/** Long enough is enough: what is measured after that is like what was measured before. */
async function untilMeasured(visit: ServerVisit, ids: string[], limitMs: number): Promise<void> {
  const startedMs = performance.now();
  while (performance.now() - startedMs < limitMs) {
    const states = await Promise.all(ids.map((id) => stateOf(visit, id)));
    if (states.every(({ processing }) => processing === 'measured')) return;
    const failed = states.find(({ processing }) => processing === 'failed');
    if (failed) throw new Error(`A recording could not be measured: ${failed.failure}`);
    await wait(1000);
  }
}

async function stateOf(visit: ServerVisit, id: string) {
  return stateSchema.parse(await (await visit.send('GET', `/api/recordings/${id}`)).json());
}

function latencyRow(threads: string, busy: number[], idle: number[]): BenchRow {
  const p95Ms = quantile(busy, 0.95);
  return {
    what: `a small request while two recordings are measured, ${threads}: p95`,
    ours: `${short(p95Ms)} ms (p50 ${short(quantile(busy, 0.5))}, at most ${short(Math.max(...busy))}, n ${busy.length})`,
    peer: `${short(quantile(idle, 0.95))} ms when idle`,
    must: `${MOST_MS} ms`,
    holds: p95Ms < MOST_MS,
  };
}

function memoryRow(threads: string, peakMb: number): BenchRow {
  return {
    what: `the server meanwhile, ${threads}: highest memory`,
    ours: megabytes(peakMb),
    must: megabytes(MOST_SERVER_MB),
    holds: peakMb < MOST_SERVER_MB,
  };
}

function quantile(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? Number.NaN;
}
