import { v7 as uuidV7 } from 'uuid';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { eventRevisions } from '../../../../server/db/schema/events.ts';
import { markInput, seedAssigned, seedMark, type Assigned } from '../../../support/server/seed-marking.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let assigned: Assigned;
beforeAll(async () => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
});
afterAll(() => app.close());
beforeEach(async () => {
  assigned = await seedAssigned(app);
});

const labeler = () => app.as('labeler');
const body = (facts: object = {}) => ({
  ...markInput(assigned.passId),
  recordingId: assigned.recordingId,
  ...facts,
});

describe('setting a mark', () => {
  test('measures the span on the untouched samples', async () => {
    const event = await seedMark(app, assigned);
    // The file holds bursts of amplitude 0.5 at 30 kHz from sample 9,600 on.
    expect(event.parameters).toMatchObject({
      onsetSample: 9_600,
      endSample: 9_900,
      hearingClass: 'above',
      clipped: false,
    });
    // Sampled 3.2 times a period, the highest sample lies up to cos(pi / 3.2) = 5.1 dB under the envelope.
    const envelopeDb = 20 * Math.log10(0.5);
    expect(event.parameters?.peakDb).toBeLessThanOrEqual(envelopeDb);
    expect(event.parameters?.peakDb).toBeGreaterThan(envelopeDb - 5.2);
  });

  test('under an id of the client is safe to repeat', async () => {
    const id = uuidV7();
    const first = await labeler().put(`/api/events/${id}`).send(body());
    const again = await labeler().put(`/api/events/${id}`).send(body());
    expect([first.status, again.status]).toEqual([200, 200]);
    expect(again.body).toEqual(first.body);
    expect(revisionsOf(id)).toHaveLength(1);
  });

  test('again after it was changed is refused with the mark as it is now, and after it was deleted as gone', async () => {
    const id = uuidV7();
    const again = () => labeler().put(`/api/events/${id}`).send(body());
    await again();
    await labeler().patch(`/api/events/${id}`).set('If-Match', '"1"').send({ note: 'double' });
    const changed = await again();
    expect([changed.status, changed.body.current?.note]).toEqual([412, 'double']);
    await labeler().delete(`/api/events/${id}`).set('If-Match', '"2"').expect(204);
    expect((await again()).status).toBe(410);
  });

  test('in the name of somebody else than is signed in asks to sign in, and stores nothing', async () => {
    const id = uuidV7();
    const late = await labeler().put(`/api/events/${id}`).set('Recalesce-Person', uuidV7()).send(body());
    expect([late.status, late.body.code]).toEqual([401, 'sign-in-required']);
    expect(revisionsOf(id)).toEqual([]);
  });

  test('twice under one id at the same time stores one mark', async () => {
    const id = uuidV7();
    const answers = await Promise.all([1, 2, 3].map(() => labeler().put(`/api/events/${id}`).send(body())));
    expect(answers.map((answer) => answer.status)).toEqual([200, 200, 200]);
    expect(revisionsOf(id)).toHaveLength(1);
  });

  test.each([
    [{ startSample: 9_900 }, 'endSample'],
    [{ endSample: 48_001 }, 'endSample'],
    [{ channel: 1 }, 'channel'],
    [{ classKey: 'thunder' }, 'classKey'],
    [{ lowHz: 40_000, highHz: 30_000 }, 'highHz'],
    [{ highHz: 48_001 }, 'highHz'],
    [{ origin: 'candidate' }, 'candidateId'],
    [{ candidateId: uuidV7() }, 'candidateId'],
    [{ confidence: 'certain' }, 'confidence'],
  ])('that does not fit is refused at its field: %j', async (facts, path) => {
    const answer = await labeler().put(`/api/events/${uuidV7()}`).send(body(facts));
    expect(answer.status).toBe(422);
    expect(answer.body.fields).toEqual([expect.objectContaining({ path })]);
  });

  test('may end with the last sample, which is exclusive', async () => {
    const answer = await labeler()
      .put(`/api/events/${uuidV7()}`)
      .send(body({ startSample: 47_999, endSample: 48_000 }));
    expect(answer.status).toBe(200);
  });

  test('of a candidate is impossible in a blind pass, whose candidates nobody was shown', async () => {
    const answer = await labeler()
      .put(`/api/events/${uuidV7()}`)
      .send(body({ origin: 'candidate', candidateId: uuidV7() }));
    expect(answer.body.fields).toEqual([
      { path: 'candidateId', message: 'is no candidate of this recording' },
    ]);
  });

  test('of the class "voice" holds the recording, and takes it out of sight of its labeler', async () => {
    const answer = await labeler()
      .put(`/api/events/${uuidV7()}`)
      .send(body({ classKey: 'voice' }));
    expect(answer.status).toBe(200);
    await labeler().get(`/api/recordings/${assigned.recordingId}`).expect(404);
    const lab = await app.as('reviewer').get(`/api/recordings/${assigned.recordingId}`);
    expect(lab.body).toMatchObject({
      sharing: 'held',
      findings: [{ kind: 'voice-marked', place: 'samples 9600 to 9900' }],
    });
  });
});

describe('changing a mark', () => {
  test('needs the revision that was looked at', async () => {
    const { id } = await seedMark(app, assigned);
    const blind = await labeler().patch(`/api/events/${id}`).send({ note: 'double' });
    expect(blind.status).toBe(428);
    const changed = await labeler()
      .patch(`/api/events/${id}`)
      .set('If-Match', '"1"')
      .send({ note: 'double' });
    expect(changed.body).toMatchObject({ note: 'double', revision: 2 });
    expect(changed.headers.etag).toBe('"2"');
  });

  test('from an older revision is refused, with the mark as it is now', async () => {
    const { id } = await seedMark(app, assigned);
    await labeler().patch(`/api/events/${id}`).set('If-Match', '"1"').send({ confidence: 'unsure' });
    const stale = await labeler().patch(`/api/events/${id}`).set('If-Match', '"1"').send({ note: 'mine' });
    expect(stale.status).toBe(412);
    expect(stale.body.current).toMatchObject({ id, revision: 2, confidence: 'unsure', note: '' });
  });

  test('measures again where the span changes, and only there', async () => {
    const event = await seedMark(app, assigned);
    const patch = (revision: number, change: object) =>
      labeler().patch(`/api/events/${event.id}`).set('If-Match', `"${revision}"`).send(change);
    expect((await patch(1, { classKey: 'twin' })).body.parameters).toEqual(event.parameters);
    expect((await patch(2, { startSample: 9_610 })).body.parameters).toMatchObject({ onsetSample: 9_610 });
  });

  test('keeps every revision, the deletion too', async () => {
    const { id } = await seedMark(app, assigned);
    await labeler().patch(`/api/events/${id}`).set('If-Match', '"1"').send({ note: 'double' });
    await labeler().delete(`/api/events/${id}`).set('If-Match', '"2"').expect(204);
    expect(revisionsOf(id).map((row) => row.state)).toMatchObject([
      { note: '' },
      { note: 'double' },
      { deleted: true },
    ]);
    await labeler().delete(`/api/events/${id}`).set('If-Match', '"3"').expect(410);
  });

  test('is over when the pass is finished', async () => {
    const { id } = await seedMark(app, assigned);
    await labeler()
      .post(`/api/passes/${assigned.passId}/finish`)
      .send({ remark: 'Looked over quickly.' })
      .expect(200);
    const late = await labeler().patch(`/api/events/${id}`).set('If-Match', '"1"').send({ note: 'late' });
    expect(late.status).toBe(409);
    expect(late.body.detail).toContain('finished');
  });
});

describe('reading marks', () => {
  test('shows the own ones to a labeler, all to a curator, and to the lab those of finished passes', async () => {
    const { id } = await seedMark(app, assigned);
    const idsFor = async (name: 'labeler' | 'curator' | 'contributor') =>
      (await app.as(name).get(`/api/recordings/${assigned.recordingId}/events`)).body.items.map(
        (event: { id: string }) => event.id,
      );
    expect([await idsFor('labeler'), await idsFor('curator'), await idsFor('contributor')]).toEqual([
      [id],
      [id],
      [],
    ]);
    await labeler().post(`/api/passes/${assigned.passId}/finish`).send({ remark: 'Looked over quickly.' });
    expect(await idsFor('contributor')).toEqual([id]);
  });
});

function revisionsOf(eventId: string) {
  return app.deps.db
    .select()
    .from(eventRevisions)
    .all()
    .filter((row) => row.eventId === eventId);
}
