import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { write } from '../../../../server/db/transaction.ts';
import { replaceRoles } from '../../../../server/features/people/people.queries.ts';
import { drawWindows } from '../../../../shared/domain/pass-windows.ts';
import { markInput, seedAssigned, seedMark } from '../../../support/server/seed-marking.ts';
import { seedMeasured, seedRecording, setSharing } from '../../../support/server/seed-recordings.ts';
import { roundCandidates, seedRound } from '../../../support/server/seed-rounds.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
});
afterAll(() => app.close());

const assign = (recordingId: string, labelerId = app.personIds.labeler) =>
  app.as('curator').post('/api/passes').send({ recordingId, labelerId });

const finish = (passId: string, remark: string) =>
  app.as('labeler').post(`/api/passes/${passId}/finish`).send({ remark });

describe('assigning a pass', () => {
  test('is blind unless said otherwise, and appears in the list of its labeler', async () => {
    const recordingId = await seedMeasured(app, { sharing: 'shared' });
    const { body } = await assign(recordingId);
    expect(body).toMatchObject({ blind: true, state: 'assigned', eventCount: 0, durationS: 0.5 });
    const mine = await app.as('labeler').get('/api/passes?mine=true&state=assigned');
    expect(mine.body.items.map((pass: { id: string }) => pass.id)).toContain(body.id);
  });

  test('asks for a measured recording', async () => {
    const answer = await assign(await seedRecording(app, { sharing: 'shared' }));
    expect(answer.status).toBe(409);
    expect(answer.body.detail).toContain('measured');
  });

  test('asks for somebody who marks recordings, and only once', async () => {
    const recordingId = await seedMeasured(app, { sharing: 'shared' });
    const nobody = await assign(recordingId, app.personIds.contributor);
    expect(nobody.body.fields).toEqual([expect.objectContaining({ path: 'labelerId' })]);
    await assign(recordingId).expect(201);
    await assign(recordingId).expect(409);
  });

  test('can be taken back while it is open', async () => {
    const { passId } = await seedAssigned(app);
    const cancelled = await app.as('curator').post(`/api/passes/${passId}/cancel`);
    expect(cancelled.body.state).toBe('cancelled');
    await app
      .as('labeler')
      .post(`/api/passes/${passId}/finish`)
      .send({ remark: 'Looked over quickly.' })
      .expect(404);
    await app.as('curator').post(`/api/passes/${passId}/cancel`).expect(409);
  });

  test('disappears with the sharing of its recording', async () => {
    const { recordingId, passId } = await seedAssigned(app);
    setSharing(app, recordingId, 'held');
    const mine = await app.as('labeler').get('/api/passes?mine=true');
    expect(mine.body.items.map((pass: { id: string }) => pass.id)).not.toContain(passId);
    await app
      .as('labeler')
      .post(`/api/passes/${passId}/finish`)
      .send({ remark: 'Looked over quickly.' })
      .expect(404);
  });
});

describe('a blind pass', () => {
  test('is blind for a labeler who has another role that shows the recording', async () => {
    const { recordingId } = await seedAssigned(app);
    const { db } = app.deps;
    write(db, (tx) => replaceRoles(tx, app.personIds.labeler, ['labeler', 'curator']));
    try {
      const { body } = await app.as('labeler').get(`/api/recordings/${recordingId}`);
      expect(body).toMatchObject({ blind: true, candidateCount: null });
      await app.as('labeler').get(`/api/recordings/${recordingId}/candidates`).expect(404);
    } finally {
      write(db, (tx) => replaceRoles(tx, app.personIds.labeler, ['labeler']));
    }
  });

  test('hides candidates and counts from its labeler until it is finished', async () => {
    const { recordingId, passId } = await seedAssigned(app);
    const seen = async () => (await app.as('labeler').get(`/api/recordings/${recordingId}`)).body;
    expect(await seen()).toMatchObject({ blind: true, candidateCount: null, eventCount: null });
    await app.as('labeler').get(`/api/recordings/${recordingId}/candidates`).expect(404);
    await app
      .as('labeler')
      .post(`/api/passes/${passId}/finish`)
      .send({ remark: 'Looked over quickly.' })
      .expect(200);
    expect(await seen()).toMatchObject({ blind: false });
    await app.as('labeler').get(`/api/recordings/${recordingId}/candidates`).expect(200);
  });
});

describe('kinds of passes', () => {
  const order = async (facts: object) => {
    const recordingId = await seedMeasured(app, { sharing: 'shared' });
    const input = { recordingId, labelerId: app.personIds.labeler, ...facts };
    return app.as('curator').post('/api/passes').send(input);
  };
  const messageOf = (answer: { body: { fields: { path: string; message: string }[] } }) =>
    answer.body.fields.map(({ path, message }) => `${path} ${message}`).join();

  test('windows are drawn one in each equal part, and can be drawn again from the seed that is kept', async () => {
    const { body } = await order({ kind: 'windows', windows: { count: 4, lengthS: 0.05 } });
    expect(body.windows).toEqual(
      drawWindows({ frames: 48_000, count: 4, windowSamples: 4_800 }, body.windowSeed),
    );
    expect(body).toMatchObject({ kind: 'windows', blind: true, likelyMinutes: 2 });
  });

  test('windows that do not fit are refused in words', async () => {
    const answer = await order({ kind: 'windows', windows: { count: 20, lengthS: 0.05 } });
    expect([answer.status, messageOf(answer)]).toEqual([
      422,
      'windows cannot be drawn: so many windows of this length do not fit into the recording',
    ]);
  });

  test('rounds are never blind, have an order, and tell their likely minutes', async () => {
    const blind = await order({ kind: 'rounds', roundOrder: 'strength' });
    expect([blind.status, messageOf(blind)]).toEqual([
      422,
      'blind cannot go with rounds: they show one candidate of the machine after another',
    ]);
    expect(messageOf(await order({ kind: 'rounds', blind: false }))).toContain('roundOrder');
    const open = await order({ kind: 'rounds', blind: false, roundOrder: 'strength' });
    expect(open.body).toMatchObject({ kind: 'rounds', roundOrder: 'strength', likelyMinutes: 1 });
  });

  test('growth phases are marked over the whole run, by nobody who hears it at the same time', async () => {
    expect(
      messageOf(await order({ task: 'phases', kind: 'windows', windows: { count: 2, lengthS: 0.01 } })),
    ).toContain('whole run');
    const { recordingId } = await seedAssigned(app);
    const again = await app
      .as('curator')
      .post('/api/passes')
      .send({ recordingId, labelerId: app.personIds.labeler, task: 'phases' });
    expect(again.status).toBe(409);
  });

  test('a second pass may follow once the first is finished, and does not see the marks of the first while it is blind', async () => {
    const assigned = await seedAssigned(app);
    await seedMark(app, assigned);
    await finish(assigned.passId, 'Only the beginning.').expect(200);
    await assign(assigned.recordingId).expect(201);
    const { body } = await app.as('labeler').get(`/api/recordings/${assigned.recordingId}/events`);
    expect(body.items).toEqual([]);
  });
});

describe('a mark', () => {
  const setAt = async (startSample: number, passId: string, recordingId: string) =>
    app
      .as('labeler')
      .post(`/api/recordings/${recordingId}/events`)
      .send(markInput(passId, { startSample, endSample: startSample + 100 }));

  test('that begins outside the windows of its pass is refused, inside it is stored, also where it ends outside', async () => {
    const pass = { kind: 'windows' as const, windows: { count: 2, lengthS: 0.05 } };
    const { recordingId, passId } = await seedAssigned(app, { pass });
    const { items } = (await app.as('labeler').get(`/api/passes?recordingId=${recordingId}`)).body;
    const { startSample, endSample } = items[0].windows[0];
    const outside = await setAt(endSample, passId, recordingId);
    expect(outside.body.fields).toEqual([
      { path: 'startSample', message: 'lies outside the windows of this pass' },
    ]);
    expect((await setAt(startSample, passId, recordingId)).status).toBe(201);
    expect((await setAt(endSample - 1, passId, recordingId)).status).toBe(201);
  });

  test('of an event is refused in a pass of growth phases', async () => {
    const { recordingId, passId } = await seedAssigned(app, { pass: { task: 'phases' } });
    const answer = await setAt(100, passId, recordingId);
    expect([answer.status, answer.body.detail]).toEqual([409, expect.stringContaining('growth phases')]);
  });
});

describe('coverage', () => {
  const seen = (startSample: number, endSample: number, detail = 8) => ({
    ...{ way: 'seen', channel: 0, startSample, endSample, detail },
  });
  const add = (passId: string, spans: object[]) =>
    app.as('labeler').post(`/api/passes/${passId}/coverage`).send({ spans });
  const read = async (passId: string) => (await app.as('labeler').get(`/api/passes/${passId}/coverage`)).body;

  test('joins what touches, and a batch that comes twice changes nothing', async () => {
    const { passId } = await seedAssigned(app);
    const batch = [seen(0, 12_000), seen(12_000, 24_000), { ...seen(0, 4_800), way: 'heard', detail: 10 }];
    const first = await add(passId, batch);
    expect(first.body).toEqual({ seenShare: 0.5, heardShare: 0.1 });
    expect((await add(passId, batch)).body).toEqual(first.body);
    expect(await read(passId)).toMatchObject({
      seen: [{ channel: 0, startSample: 0, endSample: 24_000 }],
      heard: [{ channel: 0, startSample: 0, endSample: 4_800 }],
    });
  });

  test('counts what lies in the windows alone', async () => {
    const pass = { kind: 'windows' as const, windows: { count: 2, lengthS: 0.05 } };
    const { passId } = await seedAssigned(app, { pass });
    expect((await add(passId, [seen(0, 24_000)])).body.seenShare).toBe(0.5);
    expect((await add(passId, [seen(0, 48_000)])).body.seenShare).toBe(1);
  });

  test.each([
    ['a channel that is not there', { channel: 1 }, /channel/],
    ['what lies behind the end', { endSample: 48_001 }, /end after/],
    ['a view from too far', { detail: 2_000 }, /short burst/],
    ['an empty span', { endSample: 0 }, /after the start/],
  ])('refuses %s in words', async (_, facts, words) => {
    const { passId } = await seedAssigned(app);
    const answer = await add(passId, [{ ...seen(0, 4_800), ...facts }]);
    expect([answer.status, JSON.stringify(answer.body.fields)]).toEqual([422, expect.stringMatching(words)]);
    expect((await read(passId)).seenShare).toBe(0);
  });

  test('is over with the pass, and there is none without the sound', async () => {
    const { passId } = await seedAssigned(app);
    await finish(passId, 'Nothing to see.').expect(200);
    await add(passId, [seen(0, 100)]).expect(409);
    const phases = await seedAssigned(app, { pass: { task: 'phases' } });
    await add(phases.passId, [seen(0, 100)]).expect(409);
  });

  test('is needed to finish, or a reason why something was left out', async () => {
    const { passId } = await seedAssigned(app);
    await add(passId, [seen(0, 36_000)]);
    const refused = await finish(passId, '');
    expect([refused.status, refused.body.fields]).toEqual([
      422,
      [{ path: 'remark', message: 'is needed: 75 % of the part was seen; say why the rest was left out' }],
    ]);
    await add(passId, [seen(36_000, 48_000)]);
    const finished = await finish(passId, '').expect(200);
    expect(finished.body.coverage).toEqual({ seenShare: 1, heardShare: 0 });
    const told = await app.as('curator').get(`/api/passes/${passId}/coverage`);
    expect(told.body.seenShare).toBe(1);
  });
});

describe('a curator', () => {
  test('changes due date and instructions while a pass is open, and what is left out stays', async () => {
    const { passId } = await seedAssigned(app, { pass: { instructions: 'Slowly.' } });
    const change = (body: object) => app.as('curator').patch(`/api/passes/${passId}`).send(body);
    expect((await change({ dueAt: '2027-03-01T12:00:00.000Z' })).body).toMatchObject({
      instructions: 'Slowly.',
      dueAt: '2027-03-01T12:00:00.000Z',
    });
    expect((await change({ dueAt: null, instructions: 'Quickly.' })).body).toMatchObject({
      instructions: 'Quickly.',
      dueAt: null,
    });
    await app.as('curator').post(`/api/passes/${passId}/cancel`).expect(200);
    const late = await change({ dueAt: null });
    expect([late.status, late.body.detail]).toEqual([409, 'Only a pass that is still open can be changed.']);
  });

  test('finds passes by person and those that are overdue', async () => {
    const { passId } = await seedAssigned(app, { pass: { dueAt: '2001-01-01T00:00:00.000Z' } });
    const { passId: later } = await seedAssigned(app, { pass: { dueAt: '2099-01-01T00:00:00.000Z' } });
    const idsOf = async (query: string) =>
      (await app.as('curator').get(`/api/passes?${query}`)).body.items.map(({ id }: { id: string }) => id);
    const overdue = await idsOf('overdue=true');
    expect([overdue.includes(passId), overdue.includes(later)]).toEqual([true, false]);
    expect(await idsOf(`labelerId=${app.personIds.labeler}`)).toContain(later);
    expect(await idsOf(`labelerId=${app.personIds.curator}`)).toEqual([]);
    await finish(passId, 'Late.').expect(200);
    expect(await idsOf('overdue=true')).not.toContain(passId);
  });
});

test('rounds are finished when every candidate has an answer, or with a reason', async () => {
  const { passId } = await seedRound(app, roundCandidates(3));
  const refused = await finish(passId, '');
  expect(refused.body.fields).toEqual([
    { path: 'remark', message: 'is needed: 3 candidates have no answer yet; say why they are left out' },
  ]);
  const finished = await finish(passId, 'Too weak to tell.').expect(200);
  // A round asks about candidates: a share of the recording that was seen would say nothing.
  expect(finished.body.coverage).toBeNull();
});
