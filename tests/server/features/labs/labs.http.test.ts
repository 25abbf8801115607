import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

const namesFor = async (actor: Parameters<TestApp['as']>[0]) =>
  (await app.as(actor).get('/api/labs')).body.items.map(({ name }: { name: string }) => name);

describe('labs', () => {
  test('a member sees the own lab, an administrator all, by name', async () => {
    expect(await namesFor('contributor')).toEqual(['Northlight Solidification Lab']);
    expect(await namesFor('otherContributor')).toEqual(['Brineworks Institute']);
    expect(await namesFor('administrator')).toEqual([
      'Brineworks Institute',
      'Northlight Solidification Lab',
    ]);
    expect(await namesFor('removedMember')).toEqual([]);
  });

  test('two labs cannot have one name', async () => {
    const answer = await app.as('administrator').post('/api/labs').send({ name: '  Brineworks Institute ' });
    expect(answer.body).toMatchObject({ status: 409, code: 'already-exists', fields: [{ path: 'name' }] });
  });

  test('renaming leaves an audit row, renaming to the same name none', async () => {
    const rename = (name: string) =>
      app.as('administrator').patch(`/api/labs/${app.ownLabId}`).send({ name });
    expect((await rename('Northlight Lab')).body.name).toBe('Northlight Lab');
    expect((await rename('Northlight Lab')).status).toBe(200);
    const audit = await app.as('administrator').get('/api/audit?action=lab.renamed');
    expect(audit.body.items).toHaveLength(1);
    expect(audit.body.items[0]).toMatchObject({ labId: app.ownLabId, detail: { name: 'Northlight Lab' } });
  });

  test('a lab that does not exist cannot be renamed', async () => {
    const answer = await app
      .as('administrator')
      .patch(`/api/labs/${app.deps.ids.next()}`)
      .send({ name: 'Nowhere' });
    expect(answer.status).toBe(404);
  });
});
