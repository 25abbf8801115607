import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import { updateRecording } from '../../../../server/features/recordings/recordings.queries.ts';
import { infoChunk } from '../../../../server/setup/demo-audio/metadata-chunks.ts';
import { seedMeasured, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
});
afterAll(() => app.close());

const held = () => seedMeasured(app, { sensitivity: ['partner-agreement'] });
const named = () =>
  seedMeasured(app, { wav: smallWav({ extraChunks: [infoChunk({ IART: 'Ines Rautio' })] }) });
const decide = (id: string, decision: string, reason = 'It was asked for by the partner.') =>
  app.as('reviewer').post(`/api/recordings/${id}/decision`).send({ decision, reason });

describe('the guard', () => {
  test('holds what was declared sensitive after it is measured', async () => {
    const id = await held();
    const listed = await app.as('reviewer').get(`/api/reviews?recordingId=${id}`);
    expect(listed.body).toMatchObject({
      total: { count: 1 },
      items: [{ recordingId: id, decisions: ['clear', 'restrict', 'refuse'], limits: null }],
    });
    expect(listed.body.items[0].findings).toEqual([
      expect.objectContaining({ kind: 'declared-sensitivity' }),
    ]);
  });

  test('holds what names a person in its header, and then never shares it', async () => {
    const id = await named();
    const listed = await app.as('reviewer').get(`/api/reviews?recordingId=${id}`);
    expect(listed.body.items[0]).toMatchObject({ decisions: ['restrict', 'refuse'] });
    expect(listed.body.items[0].findings[0]).toMatchObject({
      kind: 'personal-metadata',
      place: 'INFO/IART',
    });
    const answer = await decide(id, 'clear');
    expect(answer.status).toBe(422);
    expect(answer.body.fields).toEqual([expect.objectContaining({ path: 'decision' })]);
    expect((await decide(id, 'restrict')).body.sharing).toBe('lab');
  });

  test.each([
    ['clear', 'shared', 'recording.cleared'],
    ['restrict', 'lab', 'recording.restricted'],
    ['refuse', 'refused', 'recording.refused'],
  ])('%s makes it %s, with the reason in the audit log', async (decision, sharing, action) => {
    const id = await held();
    expect((await decide(id, decision)).body).toMatchObject({ sharing, reviewerName: 'Test reviewer' });
    const rows = app.deps.db.select().from(auditLog).where(eq(auditLog.subjectId, id)).all();
    expect(rows.at(-1)).toMatchObject({ action, detail: { reason: 'It was asked for by the partner.' } });
  });

  test('asks for a reason of a sentence', async () => {
    const answer = await decide(await held(), 'clear', 'ok');
    expect(answer.status).toBe(422);
    expect(answer.body.fields).toEqual([expect.objectContaining({ path: 'reason' })]);
  });

  test('lets nobody decide on an upload of their own', async () => {
    const id = await held();
    updateRecording(app.deps.db, id, { uploadedById: app.personIds.reviewer });
    const listed = await app.as('reviewer').get(`/api/reviews?recordingId=${id}`);
    expect(listed.body.items[0]).toMatchObject({ uploadedByMe: true, decisions: [] });
    expect(listed.body.items[0].limits).toContain('yourself');
    expect((await decide(id, 'clear')).status).toBe(403);
  });

  test('is decided once', async () => {
    const id = await held();
    await decide(id, 'clear').expect(201);
    const again = await decide(id, 'refuse');
    expect(again.status).toBe(409);
    const history = await app.as('reviewer').get(`/api/recordings/${id}/decisions`);
    expect(history.body.items).toEqual([expect.objectContaining({ decision: 'clear' })]);
  });

  test('tells the reviewers of other labs nothing, not even a number', async () => {
    await held();
    const other = await app.as('otherContributor').get('/api/reviews');
    expect(other.body).toMatchObject({ items: [], total: { count: 0 } });
  });
});
