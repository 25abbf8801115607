import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

const hourMs = 3_600_000;
const account = { name: 'Noor Halvorsen', password: 'slow copper rain window' };

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

const invite = (input: object = {}) =>
  app
    .as('administrator')
    .post('/api/invitations')
    .send({ email: 'Noor@lab.example', ...input });
const tokenOf = (link: string) => new URL(link).searchParams.get('token') ?? '';
const accept = (token: string, input: object = {}) =>
  app
    .as('anonymous')
    .post(`/api/invitations/${token}/accept`)
    .send({ ...account, ...input });

describe('an invitation', () => {
  test('tells its link once and keeps only a hash', async () => {
    const { link } = (await invite()).body;
    expect(link).toMatch(/^http:\/\/localhost:4780\/invitation\?token=[\w-]{43}$/);
    const kept = JSON.stringify(app.deps.db.$client.prepare('select * from invitations').all());
    expect(kept).not.toContain(tokenOf(link));
    expect((await app.as('administrator').get('/api/invitations')).text).not.toContain(tokenOf(link));
  });

  test('makes the account it was written for, with its roles, and signs in', async () => {
    const memberships = [{ labId: app.ownLabId, role: 'contributor' }];
    const token = tokenOf((await invite({ roles: ['labeler'], memberships })).body.link);
    expect((await app.as('anonymous').get(`/api/invitations/${token}`)).body.email).toBe('noor@lab.example');
    const answer = await accept(token);
    expect(answer.status).toBe(201);
    expect(answer.body.user).toMatchObject({ name: 'Noor Halvorsen', roles: ['labeler'], memberships });
    expect(answer.get('Set-Cookie')?.[0]).toContain('HttpOnly');
  });

  test('is good once', async () => {
    const token = tokenOf((await invite()).body.link);
    await accept(token);
    expect((await accept(token)).status).toBe(410);
    expect((await app.as('administrator').get('/api/invitations')).body.items).toEqual([]);
  });

  test('is good once also when two accept it at the same time', async () => {
    const token = tokenOf((await invite()).body.link);
    const statuses = (await Promise.all([accept(token), accept(token), accept(token)])).map(
      ({ status }) => status,
    );
    expect(statuses.sort()).toEqual([201, 410, 410]);
  });

  test('is over after 72 hours', async () => {
    const token = tokenOf((await invite()).body.link);
    app.clock.advance(72 * hourMs - 1);
    expect((await app.as('anonymous').get(`/api/invitations/${token}`)).status).toBe(200);
    app.clock.advance(1);
    expect((await accept(token)).status).toBe(410);
  });

  test('is replaced by a new one for the same address', async () => {
    const first = tokenOf((await invite()).body.link);
    const second = tokenOf((await invite()).body.link);
    expect((await accept(first)).status).toBe(404);
    expect((await accept(second)).status).toBe(201);
  });

  test('is gone once it was taken back', async () => {
    const { id, link } = (await invite()).body;
    expect((await app.as('administrator').delete(`/api/invitations/${id}`)).status).toBe(204);
    expect((await accept(tokenOf(link))).status).toBe(404);
  });

  test('is not for somebody who has an account', async () => {
    const answer = await invite({ email: 'curator@lab.example' });
    expect(answer.body).toMatchObject({ status: 409, fields: [{ path: 'email' }] });
  });

  test('server-owned fields in the body change nothing', async () => {
    const token = tokenOf((await invite()).body.link);
    const answer = await accept(token, { roles: ['administrator'], email: 'other@lab.example', id: 'x' });
    expect(answer.body.user).toMatchObject({ email: 'noor@lab.example', roles: [] });
  });

  test.each([
    ['eleven char', 'needs at least 12 characters'],
    ['x'.repeat(257), 'may have at most 256 characters'],
    ['qwertyuiop123', 'is one of those that are tried first'],
    ['Password2031!', 'is one of those that are tried first'],
    ['noorhalvorsen7', 'must not be made from the name'],
  ])('does not take the password %j', async (password, message) => {
    const token = tokenOf((await invite()).body.link);
    const answer = await accept(token, { password });
    expect(answer.status).toBe(422);
    expect(answer.body.fields[0]).toEqual({ path: 'password', message: expect.stringContaining(message) });
  });
});
