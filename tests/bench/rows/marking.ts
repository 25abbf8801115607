import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { z } from 'zod';
import { seedManyMarks } from '../../support/browser/many-marks.ts';
import type { Bench, BenchRow, RowFamily } from '../kit/bench.ts';
import { short } from '../kit/figures.ts';
import { visitMarking } from '../kit/marking-visit.ts';
import { spreadOf } from '../kit/ratios.ts';
import { ultrasonicRecording } from '../kit/recordings.ts';
import { ServerVisit } from '../kit/server-visit.ts';

const COUNTS = [1000, 10_000] as const;
/** What feels immediate (common practice for an answer to a press). */
const MOST_MARK_MS = 100;
const TIMES = 20;
const MEASURE_MS = 120_000;

const withId = z.object({ id: z.string() });
const recordingSchema = z.object({ processing: z.string(), frames: z.number() });

export const marking: RowFamily = {
  name: 'marking',
  about: 'a class key until the mark is drawn, among 1,000 and 10,000 marks, in Chromium',
  async run(bench) {
    const rows: BenchRow[] = [];
    for (const count of COUNTS) rows.push(...(await rowsAmong(bench, count)));
    return rows;
  },
};

async function rowsAmong(bench: Bench, count: number): Promise<BenchRow[]> {
  const dataDir = join(bench.folder, `marking-${count}`);
  const visit = await ServerVisit.begin(dataDir);
  try {
    const recordingId = await visit.bringIn(ultrasonicRecording(bench, 0.25));
    const frames = await untilMeasured(visit, recordingId);
    const labelerId = await becomeLabeler(visit);
    const pass = await visit.send('POST', '/api/passes', { recordingId, labelerId, blind: false });
    const { id: passId } = withId.parse(await pass.json());
    seedManyMarks(dataDir, { recordingId, passId, labelerId, frames, count });
    const seen = await visitMarking(visit, `/bench/${recordingId}?pass=${passId}`, TIMES);
    const among = `among ${count.toLocaleString('en')} marks in view`;
    return [
      timeRow(`a class key until the mark is drawn, ${among}`, seen.markMs),
      timeRow(`Page Down in the table until the next mark is in hand, ${among}`, seen.rowMs),
      { what: `marking: rows of the table in the page, ${among}`, ours: short(seen.rowsInPage) },
    ];
  } finally {
    await visit.end();
  }
}

function timeRow(what: string, timesMs: readonly number[]): BenchRow {
  const { least, median, most } = spreadOf([...timesMs]);
  return {
    what: `marking: ${what}`,
    ours: `${short(median)} ms (${short(least)}-${short(most)}, n ${timesMs.length})`,
    must: `${MOST_MARK_MS} ms`,
    holds: median < MOST_MARK_MS,
  };
}

async function becomeLabeler(visit: ServerVisit): Promise<string> {
  const answer: unknown = await (await visit.send('GET', '/api/sessions/current')).json();
  const { user } = z.object({ user: withId }).parse(answer);
  await visit.send('PATCH', `/api/people/${user.id}`, { roles: ['administrator', 'curator', 'labeler'] });
  return user.id;
}

async function untilMeasured(visit: ServerVisit, id: string): Promise<number> {
  const startedMs = performance.now();
  while (performance.now() - startedMs < MEASURE_MS) {
    const answer: unknown = await (await visit.send('GET', `/api/recordings/${id}`)).json();
    const { processing, frames } = recordingSchema.parse(answer);
    if (processing === 'measured') return frames;
    await wait(500);
  }
  throw new Error('The recording was not measured in time.');
}
