import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { z } from 'zod';
import { seedManyCandidates } from '../../support/browser/many-candidates.ts';
import type { BenchRow, RowFamily } from '../kit/bench.ts';
import { short } from '../kit/figures.ts';
import { spreadOf } from '../kit/ratios.ts';
import { ultrasonicRecording } from '../kit/recordings.ts';
import { visitRound } from '../kit/round-visit.ts';
import { ServerVisit } from '../kit/server-visit.ts';

/** What feels immediate (common practice for an answer to a press). */
const MOST_NEXT_MS = 100;
const MOST_LIKENESS_MS = 10_000;
const MANY = 100_000;
const FEW = 5_000;
const TIMES = 40;
const MEASURE_MS = 120_000;

const withId = z.object({ id: z.string() });

export const rounds: RowFamily = {
  name: 'rounds',
  about:
    'a key that answers a candidate until the next one is drawn, and look-alikes among 100,000, in Chromium',
  async run(bench) {
    const dataDir = join(bench.folder, 'rounds');
    const visit = await ServerVisit.begin(dataDir);
    try {
      const recordingId = await visit.bringIn(ultrasonicRecording(bench, 0.25));
      await untilMeasured(visit, recordingId);
      const count = bench.isQuick ? FEW : MANY;
      seedManyCandidates(dataDir, recordingId, count);
      const passId = await beginRound(visit, recordingId);
      const seen = await visitRound(visit, `/bench/${recordingId}?pass=${passId}`, TIMES);
      return [nextRow(seen.nextMs), likenessRow(seen.likenessMs, count)];
    } finally {
      await visit.end();
    }
  },
};

function nextRow(nextMs: readonly number[]): BenchRow {
  const sorted = [...nextMs].sort((a, b) => a - b);
  const { median, most } = spreadOf(sorted);
  const p95 = sorted[Math.floor(0.95 * (sorted.length - 1))] ?? Number.NaN;
  return {
    what: 'rounds: a key that answers until the next candidate is drawn',
    ours: `${short(median)} ms (p95 ${short(p95)}, at most ${short(most)}, n ${sorted.length})`,
    must: `${MOST_NEXT_MS} ms`,
    holds: median < MOST_NEXT_MS,
  };
}

function likenessRow(likenessMs: number, count: number): BenchRow {
  return {
    what: `rounds: ${count.toLocaleString('en')} candidates in groups that look alike, until the first is shown`,
    ours: `${short(likenessMs)} ms`,
    must: `${MOST_LIKENESS_MS} ms`,
    holds: likenessMs < MOST_LIKENESS_MS,
  };
}

async function beginRound(visit: ServerVisit, recordingId: string): Promise<string> {
  const answer: unknown = await (await visit.send('GET', '/api/sessions/current')).json();
  const { user } = z.object({ user: withId }).parse(answer);
  await visit.send('PATCH', `/api/people/${user.id}`, { roles: ['administrator', 'curator', 'labeler'] });
  const order = { kind: 'rounds', roundOrder: 'strength', blind: false };
  const pass = await visit.send('POST', '/api/passes', { recordingId, labelerId: user.id, ...order });
  return withId.parse(await pass.json()).id;
}

async function untilMeasured(visit: ServerVisit, id: string): Promise<void> {
  const startedMs = performance.now();
  while (performance.now() - startedMs < MEASURE_MS) {
    const answer: unknown = await (await visit.send('GET', `/api/recordings/${id}`)).json();
    if (z.object({ processing: z.string() }).parse(answer).processing === 'measured') return;
    await wait(500);
  }
  throw new Error('The recording was not measured in time.');
}
