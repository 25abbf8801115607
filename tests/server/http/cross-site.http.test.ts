import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { createTestApp, type TestApp } from '../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const own = 'http://localhost:4780';

function post(headers: Record<string, string>, signedIn = true) {
  const cookie = signedIn ? { Cookie: `${app.deps.cookie.name}=${app.sessionTokens.curator}` } : {};
  return supertest(app.http)
    .post('/api/tokens')
    .set({ ...cookie, ...headers })
    .send({ name: 'night script' });
}

describe('a change sent with the cookie', () => {
  test.each([
    [{ 'Sec-Fetch-Site': 'same-origin' }, 201],
    [{ 'Sec-Fetch-Site': 'same-origin', Origin: own }, 201],
    [{ Origin: own }, 201],
    [{ 'Sec-Fetch-Site': 'cross-site' }, 403],
    [{ 'Sec-Fetch-Site': 'cross-site', Origin: own }, 403],
    [{ 'Sec-Fetch-Site': 'same-site' }, 403],
    [{ 'Sec-Fetch-Site': 'none' }, 403],
    [{ Origin: 'http://localhost:4780.evil.example' }, 403],
    [{ Origin: 'https://localhost:4780' }, 403],
    [{ Origin: 'null' }, 403],
    [{}, 403],
  ])('with %j is answered by %i', async (headers, status) => {
    const answer = await post(headers as Record<string, string>);
    expect(answer.status).toBe(status);
    if (status === 403) expect(answer.body.code).toBe('cross-site');
  });

  test('answers say that they depend on where the request came from', async () => {
    expect((await post({ Origin: own })).get('Vary')).toMatch(/Sec-Fetch-Site, Origin/);
  });

  test('nothing is allowed to other origins', async () => {
    const answer = await supertest(app.http).get('/api/health').set('Origin', 'https://evil.example');
    expect(answer.get('Access-Control-Allow-Origin')).toBeUndefined();
  });
});

describe('signing in from another site', () => {
  const body = { email: 'curator@lab.example', password: 'not this one at all' };

  test('is refused, so that nobody is signed in as somebody else unawares', async () => {
    const answer = await supertest(app.http)
      .post('/api/sessions')
      .set('Origin', 'https://evil.example')
      .send(body);
    expect(answer.status).toBe(403);
  });

  test('is possible for a script, which has neither origin nor cookie', async () => {
    expect((await supertest(app.http).post('/api/sessions').send(body)).status).toBe(401);
  });
});
