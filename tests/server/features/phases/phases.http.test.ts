import { v7 as uuidV7 } from 'uuid';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import {
  phaseInput,
  seedPhase,
  seedPhasePass,
  seedRunOfRecording,
} from '../../../support/server/seed-phases.ts';
import { seedPass } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let runId: string;
let recordingId: string;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());
beforeEach(async () => {
  ({ runId, recordingId } = await seedRunOfRecording(app, { sharing: 'shared' }));
});

const contributor = () => app.as('contributor');
const labeler = () => app.as('labeler');
const list = async (who: 'contributor' | 'labeler' | 'curator' = 'contributor') =>
  (await app.as(who).get(`/api/runs/${runId}/phases`).expect(200)).body;

describe('telling a growth phase', () => {
  test('is kept with what it was told from, in order of time; several may overlap', async () => {
    const body = phaseInput({ basis: 'temperature', confidence: 'probable', note: 'first arms at 1.0 s' });
    const made = await contributor().post(`/api/runs/${runId}/phases`).send(body).expect(201);
    await contributor()
      .post(`/api/runs/${runId}/phases`)
      .send(phaseInput({ phase: 'recalescence', startNs: -500_000_000, endNs: 1_200_000_000 }))
      .expect(201);
    expect(made.body).toMatchObject({ ...body, runId, revision: 1, editable: true, isSoundOpen: true });
    expect(made.headers.etag).toBe('"1"');
    expect((await list()).items.map(({ phase }: { phase: string }) => phase)).toEqual([
      'recalescence',
      'dendritic-growth',
    ]);
  });

  test('under an id of the client is safe to repeat', async () => {
    const id = uuidV7();
    const body = { ...phaseInput(), runId };
    const first = await contributor().put(`/api/phases/${id}`).send(body).expect(200);
    const again = await contributor().put(`/api/phases/${id}`).send(body).expect(200);
    expect(again.body).toEqual(first.body);
    expect((await list()).items).toHaveLength(1);
    const other = { ...body, phase: 'planar-growth' };
    await contributor().put(`/api/phases/${id}`).send(other).expect(409);
    const changed = await contributor().put(`/api/phases/${id}`).set('If-Match', '"1"').send(other);
    expect(changed.body).toMatchObject({ phase: 'planar-growth', revision: 2 });
  });

  test.each([
    [{ endNs: 1_000_000_000 }, 'endNs', 'must lie after the start'],
    [{ endNs: 2e15 }, 'endNs', 'is no time of a run'],
    [{ startNs: 0.5 }, 'startNs', undefined],
    [{ phase: 'boiling' }, 'phase', undefined],
    [{ basis: 'sound' }, 'basis', undefined],
  ])('that does not fit is refused at its field: %j', async (facts, path, message) => {
    const body = { ...phaseInput(), ...facts };
    const answer = await contributor().post(`/api/runs/${runId}/phases`).send(body);
    expect(answer.status).toBe(422);
    expect(answer.body.fields).toEqual([expect.objectContaining(message ? { path, message } : { path })]);
  });

  test('is written into the audit log with each change', async () => {
    const { id } = seedPhase(app, runId);
    await contributor()
      .patch(`/api/phases/${id}`)
      .set('If-Match', '"1"')
      .send({ endNs: 4_000_000_000 })
      .expect(200);
    await contributor().delete(`/api/phases/${id}`).set('If-Match', '"2"').expect(204);
    const rows = app.deps.db.select().from(auditLog).all();
    expect(rows.filter(({ subjectId }) => subjectId === id).map(({ action }) => action)).toEqual([
      'phase.created',
      'phase.changed',
      'phase.deleted',
    ]);
  });
});

describe('changing a growth phase', () => {
  test('from an older revision is refused, with the phase as it is now', async () => {
    const { id } = seedPhase(app, runId);
    const patch = (change: object) =>
      contributor().patch(`/api/phases/${id}`).set('If-Match', '"1"').send(change);
    await patch({ confidence: 'unsure' }).expect(200);
    const stale = await patch({ note: 'mine' }).expect(412);
    expect(stale.body.current).toMatchObject({ id, revision: 2, confidence: 'unsure', note: '' });
    await contributor().patch(`/api/phases/${id}`).send({ note: 'mine' }).expect(428);
  });

  test('may not turn its ends round', async () => {
    const { id } = seedPhase(app, runId);
    const answer = await contributor()
      .patch(`/api/phases/${id}`)
      .set('If-Match', '"1"')
      .send({ endNs: 900_000_000 });
    expect(answer.status).toBe(422);
    expect(answer.body.fields).toEqual([{ path: 'endNs', message: 'must lie after the start' }]);
  });

  test('is over once it is removed, and its id is not given to another', async () => {
    const { id } = seedPhase(app, runId);
    await contributor().delete(`/api/phases/${id}`).set('If-Match', '"1"').expect(204);
    expect((await list()).items).toEqual([]);
    await contributor().delete(`/api/phases/${id}`).set('If-Match', '"2"').expect(404);
    await contributor()
      .put(`/api/phases/${id}`)
      .send({ ...phaseInput(), runId })
      .expect(404);
  });
});

describe('a labeler', () => {
  test('who marks events blind is told nothing of them, and adds none', async () => {
    seedPhase(app, runId);
    const passId = seedPass(app, recordingId, { blind: true });
    expect(await list('labeler')).toEqual({
      items: [],
      isWithheld: true,
      may: { addForLab: false, addInPassId: null },
    });
    const answer = await labeler().post(`/api/runs/${runId}/phases`).send(phaseInput({ passId }));
    expect(answer.status).toBe(403);
    expect(answer.body.detail).toContain('blind');
  });

  test('is withheld phases of the run for a blind pass on another of its recordings too', async () => {
    const { id } = seedPhase(app, runId);
    seedPass(app, recordingId, { blind: true });
    await labeler().patch(`/api/phases/${id}`).set('If-Match', '"1"').send({ note: 'x' }).expect(404);
  });

  test('adds phases in an open pass for events, and the sound was open', async () => {
    const passId = seedPass(app, recordingId, { blind: false });
    expect((await list('labeler')).may).toEqual({ addForLab: false, addInPassId: passId });
    const made = await labeler().post(`/api/runs/${runId}/phases`).send(phaseInput({ passId })).expect(201);
    expect(made.body).toMatchObject({ passId, isSoundOpen: true, editable: true });
    await labeler().post(`/api/runs/${runId}/phases`).send(phaseInput()).expect(403);
  });

  test('in a pass for phases has the sound kept back, and the row says so', async () => {
    const passId = seedPhasePass(app, recordingId);
    const made = await labeler().post(`/api/runs/${runId}/phases`).send(phaseInput({ passId })).expect(201);
    expect(made.body).toMatchObject({ passId, isSoundOpen: false });
  });

  test('in a blind pass for phases sees the own ones and not what the lab has told', async () => {
    seedPhase(app, runId);
    const passId = seedPhasePass(app, recordingId, true);
    await labeler()
      .post(`/api/runs/${runId}/phases`)
      .send(phaseInput({ passId, phase: 'eutectic-growth' }))
      .expect(201);
    const seen = await list('labeler');
    expect(seen.items.map(({ phase }: { phase: string }) => phase)).toEqual(['eutectic-growth']);
    expect(seen.isWithheld).toBe(false);
  });

  test('keeps what was marked in a pass to curators until the pass is finished; then nobody changes it', async () => {
    const passId = seedPhasePass(app, recordingId);
    const made = await labeler().post(`/api/runs/${runId}/phases`).send(phaseInput({ passId })).expect(201);
    expect((await list('contributor')).items).toEqual([]);
    expect((await list('curator')).items).toMatchObject([{ id: made.body.id, editable: false }]);
    await labeler().post(`/api/passes/${passId}/finish`).send({}).expect(200);
    expect((await list('contributor')).items).toMatchObject([{ id: made.body.id, editable: false }]);
    const late = await labeler()
      .patch(`/api/phases/${made.body.id}`)
      .set('If-Match', '"1"')
      .send({ note: 'late' });
    expect(late.status).toBe(403);
  });

  test('cannot use a pass of another run', async () => {
    const other = await seedRunOfRecording(app, { sharing: 'shared' });
    const passId = seedPass(app, other.recordingId, { blind: false });
    seedPass(app, recordingId, { blind: false });
    await labeler().post(`/api/runs/${runId}/phases`).send(phaseInput({ passId })).expect(404);
  });
});

test('another lab reads the phases of a shared run and changes none', async () => {
  const { id } = seedPhase(app, runId);
  const seen = await app.as('otherContributor').get(`/api/runs/${runId}/phases`).expect(200);
  expect(seen.body.items).toMatchObject([{ id, editable: false }]);
  const answer = await app
    .as('otherContributor')
    .patch(`/api/phases/${id}`)
    .set('If-Match', '"1"')
    .send({ note: 'x' });
  expect(answer.status).toBe(403);
});
