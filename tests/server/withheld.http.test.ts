import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { allRoutes } from '../../server/all-routes.ts';
import type { Route } from '../../server/http/define-route.ts';
import {
  assignToLabeler,
  giveEveryRole,
  planted,
  seedPlanted,
  type Planted,
} from '../support/server/seed-withheld.ts';
import { seedCollection } from '../support/server/seed-marking.ts';
import { createTestApp, type TestApp } from '../support/server/test-app.ts';

let app: TestApp;
let found: Planted;
beforeEach(async () => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
  found = await seedPlanted(app);
});
afterEach(() => app.close());

/** Streams without end. What it announces are ids and states (`shared/contract/activity.ts`). */
const endless = ['/api/activity'];

const queries: Readonly<Record<string, string>> = {
  '/api/recordings/:id/listen': '?startSample=0&endSample=4800',
  '/api/recordings/:id/onset': '?startSample=0&endSample=4800',
  '/api/recordings/:id/region': '?channel=0&startSample=0&endSample=4800',
};

/** Everything that can be asked with GET about the planted recording, its run and the passes on it. */
function requestsOf(passId: string, collectionId: string): { route: string; address: string }[] {
  const ids: Record<string, string[]> = {
    recordings: [found.recordingId],
    runs: [found.runId],
    passes: [passId, found.otherPassId],
    events: [found.markId],
    candidates: [found.candidateId],
    phases: [found.phaseId],
    traces: [found.traceId],
    videos: [found.filmId],
    films: [found.filmId],
    collections: [collectionId],
    people: [app.personIds.labeler],
  };
  const rest: Record<string, string> = { band: 'ultrasonic', level: '0', tile: '0', version: '1' };
  return allRoutes(app.deps)
    .filter(({ method, path }) => method === 'get' && !endless.includes(path))
    .flatMap(({ path }) => {
      const noun = path.split('/')[2] ?? '';
      return (ids[noun] ?? [found.recordingId]).map((id) => ({
        route: path,
        address:
          path.replace(':id', id).replace(/:(\w+)/g, (_, name: string) => rest[name] ?? id) +
          (queries[path] ?? ''),
      }));
    });
}

async function ask(address: string): Promise<{ status: number; text: string; body: unknown }> {
  const answer = await app
    .as('labeler')
    .get(address)
    .buffer(true)
    .parse((response, done) => {
      const pieces: Buffer[] = [];
      response.on('data', (piece: Buffer) => pieces.push(piece));
      response.on('end', () => done(null, Buffer.concat(pieces)));
    });
  const text = (answer.body as Buffer).toString('latin1');
  const isJson = /json/.test(answer.headers['content-type'] ?? '') && !address.includes('jsonl');
  return { status: answer.status, text, body: isJson && text !== '' ? JSON.parse(text) : null };
}

function* objectsIn(value: unknown): Generator<Record<string, unknown>> {
  if (typeof value !== 'object' || value === null) return;
  if (!Array.isArray(value)) yield value as Record<string, unknown>;
  for (const inner of Object.values(value)) yield* objectsIn(inner);
}

/** Counts and verdicts that stand in an answer about the recording, other than of the own open pass. */
function toldFigures(body: unknown, ownPassId: string): string[] {
  const told: string[] = [];
  for (const item of objectsIn(body)) {
    const isAbout = item.id === found.recordingId || item.recordingId === found.recordingId;
    if (isAbout && item.id !== ownPassId)
      for (const key of ['candidateCount', 'eventCount', 'ultrasonicVerdict', 'remark', 'coverage'])
        if (item[key] !== null && item[key] !== undefined) told.push(`${key} ${String(item[key])}`);
    if (Array.isArray(item.activeSpans) && item.activeSpans.length > 0) told.push('activeSpans');
    if (item.activeDbPerHz) told.push('activeDbPerHz');
    if (item.verdict === 'found' || item.verdict === 'not-found') told.push('verdict');
  }
  return told;
}

const secrets = [
  String(planted.candidateHz),
  String(planted.candidateOnset),
  String(planted.markStart),
  planted.markNote,
  planted.remark,
];
const besides = [planted.phaseNote, planted.traceName, planted.filmName];

/** What leaks, as "route: what". */
async function leaks(passId: string, words: readonly string[]): Promise<string[]> {
  const leaking: string[] = [];
  const collectionId = seedCollection(app, [found.recordingId]);
  for (const { route, address } of requestsOf(passId, collectionId)) {
    const { status, text, body } = await ask(address);
    if (status >= 500) leaking.push(`${route}: answered ${status}`);
    const named = [...words, found.candidateId, found.markId].filter(
      (word) => text.includes(word) && !address.includes(word),
    );
    for (const what of [...named, ...toldFigures(body, passId)]) leaking.push(`${route}: ${what}`);
  }
  return leaking;
}

describe('while a blind pass is open, no route tells its labeler', () => {
  test('candidates, counts, verdict, other marks, or what stands beside the sound', async () => {
    const passId = assignToLabeler(app, found.recordingId);
    expect(await leaks(passId, [...secrets, ...besides])).toEqual([]);
  }, 60_000);

  test('any of it through another role that they hold', async () => {
    const passId = assignToLabeler(app, found.recordingId);
    giveEveryRole(app);
    expect(await leaks(passId, [...secrets, ...besides])).toEqual([]);
  }, 60_000);

  test('and all of it is told to the same person without such a pass', async () => {
    giveEveryRole(app);
    const told = (await leaks('', [...secrets, planted.remark])).join('\n');
    for (const word of [...secrets, 'candidateCount', 'eventCount', 'ultrasonicVerdict'])
      expect(told).toContain(word);
  }, 60_000);
});

describe('while growth phases are marked without the sound, no route tells', () => {
  /** Answers about the recording that are not made from its samples. */
  const silent = new Set(['/api/recordings/:id', '/api/recordings/:id/decisions']);

  function soundRoutes(): Route[] {
    return allRoutes(app.deps).filter(
      ({ method, path }) => method === 'get' && path.startsWith('/api/recordings/:id') && !silent.has(path),
    );
  }

  test.each(['labeler', 'every role'])(
    'anything that was made from the samples (%s)',
    async (rights) => {
      const passId = assignToLabeler(app, found.recordingId, { task: 'phases' });
      if (rights === 'every role') giveEveryRole(app);
      expect(await leaks(passId, secrets)).toEqual([]);
      const { body: timeline } = await ask(`/api/runs/${found.runId}/timeline`);
      expect(timeline).toMatchObject({ recordings: [{ id: found.recordingId, course: null }] });
      const asked = soundRoutes().map(({ path }) => path);
      expect(asked).toContain('/api/recordings/:id/audio');
      const answers: Record<string, number> = {};
      for (const { route, address } of requestsOf(passId, '')) {
        if (!asked.includes(route)) continue;
        answers[route] = (await ask(address)).status;
      }
      expect(answers).toEqual(Object.fromEntries(asked.map((path) => [path, 403])));
      const { body } = await ask(`/api/recordings/${found.recordingId}`);
      expect(body).toMatchObject({ isSoundWithheld: true, measurement: null, may: { downloadAudio: false } });
    },
    60_000,
  );

  test('anything of another recording of the same run, which heard the same', async () => {
    assignToLabeler(app, found.recordingId, { task: 'phases' });
    giveEveryRole(app);
    const { db } = app.deps;
    const row = db.$client.prepare('select * from recordings where id = ?').get(found.recordingId) as object;
    const twin = { ...row, id: app.deps.ids.next() };
    const columns = Object.keys(twin);
    db.$client
      .prepare(`insert into recordings (${columns.join(', ')}) values (${columns.map(() => '?').join(', ')})`)
      .run(...(Object.values(twin) as never[]));
    expect((await ask(`/api/recordings/${twin.id}/audio`)).status).toBe(403);
    expect((await ask(`/api/recordings/${twin.id}`)).body).toMatchObject({ isSoundWithheld: true });
  });

  test('and the sound opens when the pass is finished', async () => {
    const passId = assignToLabeler(app, found.recordingId, { task: 'phases' });
    const audio = `/api/recordings/${found.recordingId}/audio`;
    const refused = await ask(audio);
    expect([refused.status, refused.text]).toEqual([403, expect.stringContaining('camera and temperature')]);
    await app.as('labeler').post(`/api/passes/${passId}/finish`).send({}).expect(200);
    expect((await ask(audio)).status).toBe(200);
  });
});
