import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

const administrator = () => app.as('administrator');
const change = (personId: string, input: object) =>
  administrator().patch(`/api/people/${personId}`).send(input);

describe('the list of people', () => {
  test('is by name, page after page, without gaps or repeats', async () => {
    const names: string[] = [];
    let cursor: string | null = '';
    while (cursor !== null) {
      const answer = await administrator().get(`/api/people?limit=3${cursor && `&cursor=${cursor}`}`);
      expect(answer.body.total).toEqual({ count: 8, capped: false });
      names.push(...answer.body.items.map(({ name }: { name: string }) => name));
      cursor = answer.body.nextCursor;
    }
    expect(names).toHaveLength(8);
    expect(names).toEqual(
      [...new Set(names)].sort((left, right) => (left.toLowerCase() < right.toLowerCase() ? -1 : 1)),
    );
  });

  test('is searched in names and addresses, and a wildcard is only a character', async () => {
    const namesFor = async (q: string) =>
      (await administrator().get('/api/people').query({ q })).body.items.map(
        ({ name }: { name: string }) => name,
      );
    expect(await namesFor('CURATOR')).toEqual(['Test curator']);
    expect(await namesFor('labeler@')).toEqual(['Test labeler']);
    expect(await namesFor('%')).toEqual([]);
  });
});

describe('changing a person', () => {
  test('replaces roles and memberships, and one audit row holds before and after', async () => {
    const memberships = [{ labId: app.otherLabId, role: 'reviewer' }];
    const answer = await change(app.personIds.labeler, { roles: ['curator', 'labeler'], memberships });
    expect(answer.body).toMatchObject({ roles: ['labeler', 'curator'], memberships });
    expect(answer.body.memberships[0].labName).toBe('Brineworks Institute');
    const audit = await administrator().get(`/api/audit?subjectId=${app.personIds.labeler}`);
    expect(audit.body.items).toHaveLength(1);
    expect(audit.body.items[0]).toMatchObject({
      action: 'person.changed',
      personId: app.personIds.administrator,
      detail: { roles: { before: ['labeler'], after: ['labeler', 'curator'] } },
    });
  });

  test('without a difference leaves no audit row', async () => {
    await change(app.personIds.labeler, { roles: ['labeler'] });
    const audit = await administrator().get(`/api/audit?subjectId=${app.personIds.labeler}`);
    expect(audit.body.total.count).toBe(0);
  });

  test('to a lab that does not exist is refused as a whole', async () => {
    const memberships = [{ labId: app.deps.ids.next(), role: 'reviewer' }];
    const answer = await change(app.personIds.labeler, { name: 'Renamed', memberships });
    expect(answer.body).toMatchObject({ status: 422, fields: [{ path: 'memberships' }] });
    expect((await administrator().get(`/api/people/${app.personIds.labeler}`)).body.name).toBe(
      'Test labeler',
    );
  });

  test.each([{ disabled: true }, { roles: [] }])(
    'the last administrator cannot be lost by %j',
    async (input) => {
      const answer = await change(app.personIds.administrator, input);
      expect(answer.status).toBe(409);
      expect((await administrator().get('/api/people')).status).toBe(200);
    },
  );

  test('the last administrator can step back once there is another', async () => {
    await change(app.personIds.curator, { roles: ['curator', 'administrator'] });
    expect((await change(app.personIds.administrator, { roles: [] })).status).toBe(200);
    expect((await administrator().get('/api/people')).status).toBe(404);
  });

  test('a hash of a password leaves by no route', async () => {
    const answers = await Promise.all([
      administrator().get('/api/people'),
      administrator().get(`/api/people/${app.personIds.labeler}`),
      administrator().get('/api/sessions/current'),
    ]);
    for (const { text } of answers) expect(text).not.toMatch(/password/i);
  });
});

describe('those who may be given a pass', () => {
  test('are enabled labelers, by name alone', async () => {
    const answer = await app.as('curator').get('/api/people/labelers');
    expect(answer.body).toEqual({ items: [{ id: app.personIds.labeler, name: 'Test labeler' }] });
  });
});
