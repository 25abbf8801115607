import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { v7 as newId } from 'uuid';
import { z } from 'zod';
import type { Bench, BenchRow, RowFamily } from '../kit/bench.ts';
import { short } from '../kit/figures.ts';
import { ultrasonicRecording } from '../kit/recordings.ts';
import { ServerVisit } from '../kit/server-visit.ts';

const WRITES_PER_S = 100;
const MOST_P95_MS = 100;
const MEASURE_MS = 120_000;
/** A whole number of samples between marks, so that no two are the same. */
const BETWEEN_SAMPLES = 211;
const SPAN_SAMPLES = [384, 1920, 7680] as const;

const withId = z.object({ id: z.string() });
const marksSchema = z.object({ items: z.array(withId) });

interface Place {
  recordingId: string;
  passId: string;
}

interface Write {
  id: string;
  /** From when it was due, so that a server that falls behind cannot hide it. */
  ms: number;
  status: number;
}

export const saving: RowFamily = {
  name: 'saving',
  about: '100 marks a second stored by the built server',
  async run(bench) {
    const visit = await ServerVisit.begin(join(bench.folder, 'saving'));
    try {
      const place = await preparePass(bench, visit);
      bench.say(`storing ${WRITES_PER_S} marks a second ...`);
      const writes = await storeMarks(visit, place, bench.isQuick ? 5 : 60);
      const answer: unknown = await (
        await visit.send('GET', `/api/recordings/${place.recordingId}/events`)
      ).json();
      return rowsOf(writes, marksSchema.parse(answer).items);
    } finally {
      await visit.end();
    }
  },
};

/** A measured recording, given to the one who brought it in. */
async function preparePass(bench: Bench, visit: ServerVisit): Promise<Place> {
  const session: unknown = await (await visit.send('GET', '/api/sessions/current')).json();
  const { user } = z.object({ user: withId }).parse(session);
  await visit.send('PATCH', `/api/people/${user.id}`, { roles: ['administrator', 'curator', 'labeler'] });
  const recordingId = await visit.bringIn(ultrasonicRecording(bench, 0.25));
  await untilMeasured(visit, recordingId);
  const pass = { recordingId, labelerId: user.id, blind: false };
  const made: unknown = await (await visit.send('POST', '/api/passes', pass)).json();
  return { recordingId, passId: withId.parse(made).id };
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

/** At a constant rate, however long each answer takes; connections are kept open. */
async function storeMarks(visit: ServerVisit, place: Place, seconds: number): Promise<Write[]> {
  const beganMs = performance.now();
  const writes: Promise<Write>[] = [];
  for (let index = 0; index < seconds * WRITES_PER_S; index++) {
    const dueMs = beganMs + (index * 1000) / WRITES_PER_S;
    const earlyMs = dueMs - performance.now();
    if (earlyMs > 0) await wait(earlyMs);
    writes.push(storeMark(visit, place, { index, dueMs }));
  }
  return Promise.all(writes);
}

async function storeMark(
  visit: ServerVisit,
  place: Place,
  { index, dueMs }: { index: number; dueMs: number },
): Promise<Write> {
  const id = newId();
  const startSample = 10_000 + index * BETWEEN_SAMPLES;
  const lengthSamples = SPAN_SAMPLES[index % SPAN_SAMPLES.length] ?? SPAN_SAMPLES[0];
  const span = { channel: 0, startSample, endSample: startSample + lengthSamples };
  const mark = { ...place, ...span, classKey: 'crack', confidence: 'sure' };
  const status = await visit.send('PUT', `/api/events/${id}`, mark).then(
    async (answer) => {
      await answer.arrayBuffer();
      return answer.status;
    },
    () => 0,
  );
  return { id, ms: performance.now() - dueMs, status };
}

function rowsOf(writes: readonly Write[], kept: readonly { id: string }[]): BenchRow[] {
  const times = writes.map(({ ms }) => ms).sort((a, b) => a - b);
  const at = (share: number) =>
    times[Math.min(times.length - 1, Math.floor(share * times.length))] ?? Number.NaN;
  const stored = writes.filter(({ status }) => status === 200);
  const ids = new Set(kept.map(({ id }) => id));
  const lost = stored.filter(({ id }) => !ids.has(id)).length;
  const doubled = kept.length - ids.size;
  const foreign = kept.length - writes.filter(({ id }) => ids.has(id)).length;
  return [
    {
      what: `a mark stored while ${WRITES_PER_S} a second are: p95`,
      ours: `${short(at(0.95))} ms (p50 ${short(at(0.5))}, p99 ${short(at(0.99))}, at most ${short(at(1))}, n ${times.length})`,
      must: `${MOST_P95_MS} ms`,
      holds: at(0.95) < MOST_P95_MS,
    },
    {
      what: 'of these: refused, lost, there twice, or there unasked',
      ours: `${writes.length - stored.length}, ${lost}, ${doubled}, ${foreign}`,
      must: 'none',
      holds: stored.length === writes.length && lost + doubled + foreign === 0,
    },
  ];
}
