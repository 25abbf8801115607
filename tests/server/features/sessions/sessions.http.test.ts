import supertest from 'supertest';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { write } from '../../../../server/db/transaction.ts';
import { createDeps } from '../../../../server/deps.ts';
import { replaceRoles, updateUser } from '../../../../server/features/people/people.queries.ts';
import { testPassword } from '../../../support/server/seed-actors.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

const minuteMs = 60_000;
const hourMs = 60 * minuteMs;

let app: TestApp;
beforeEach(async () => {
  app = createTestApp();
  const passwordHash = await app.deps.hasher.hash(testPassword);
  updateUser(app.deps.db, app.personIds.curator, { passwordHash });
});
afterEach(() => app.close());

const signIn = (email: string, password: string) =>
  app.as('anonymous').post('/api/sessions').send({ email, password });
const whoAmI = (cookie: string) => supertest(app.http).get('/api/sessions/current').set('Cookie', cookie);
const cookieOf = (answer: supertest.Response) => String(answer.get('Set-Cookie')?.[0]).split(';')[0] ?? '';

describe('who am I', () => {
  test('nobody is signed in without a cookie, and that is no error', async () => {
    const answer = await app.as('anonymous').get('/api/sessions/current');
    expect(answer.status).toBe(200);
    expect(answer.body).toEqual({ user: null });
  });

  test('a signed-in person sees name, roles and packed rules', async () => {
    const answer = await app.as('curator').get('/api/sessions/current');
    expect(answer.body.user).toMatchObject({
      name: 'Test curator',
      roles: ['curator'],
      email: 'curator@lab.example',
    });
    expect(answer.body.user.rules.length).toBeGreaterThan(0);
  });
});

describe('signing in', () => {
  test('sets one cookie that scripts in the page cannot read and other sites cannot send', async () => {
    const answer = await signIn('Curator@lab.example ', testPassword);
    expect(answer.status).toBe(201);
    const cookies = answer.get('Set-Cookie') ?? [];
    expect(cookies).toHaveLength(1);
    expect(cookies[0]).toMatch(/^recalesce-session=.+; Max-Age=1800; Path=\/; .*HttpOnly; SameSite=Strict$/);
    expect((await whoAmI(cookieOf(answer))).body.user.id).toBe(app.personIds.curator);
  });

  test('over https the cookie is secure and bound to the host', async () => {
    const secure = createTestApp({ RECALESCE_PUBLIC_URL: 'https://sound.lab.example' });
    const { id } = secure.actor('curator');
    updateUser(secure.deps.db, id, { passwordHash: await secure.deps.hasher.hash(testPassword) });
    const body = { email: 'curator@lab.example', password: testPassword };
    const answer = await secure.as('anonymous').post('/api/sessions').send(body);
    expect(answer.get('Set-Cookie')?.[0]).toMatch(
      /^__Host-recalesce=.*; Path=\/; .*HttpOnly; Secure; SameSite=Strict$/,
    );
    await secure.close();
  });

  test('a wrong password, an unknown address and a disabled account get the same answer', async () => {
    const answers = [
      await signIn('curator@lab.example', 'not this one at all'),
      await signIn('nobody@lab.example', testPassword),
      await signIn('disabled@lab.example', testPassword),
    ];
    const told = answers.map(({ status, body }) => ({ status, ...body, requestId: '' }));
    expect(told[0]).toMatchObject({ status: 401, code: 'sign-in-refused' });
    expect(told[1]).toEqual(told[0]);
    expect(told[2]).toEqual(told[0]);
  });

  test('the eleventh failure for one account is told to wait, and another account is not', async () => {
    for (let attempt = 1; attempt <= 10; attempt += 1) {
      expect((await signIn('curator@lab.example', 'not this one at all')).status).toBe(401);
    }
    const refused = await signIn('curator@lab.example', testPassword);
    expect(refused.status).toBe(429);
    expect(Number(refused.get('Retry-After'))).toBeGreaterThan(0);
    expect(refused.body).toMatchObject({
      code: 'too-many-requests',
      detail: expect.stringMatching(/Try again in/),
    });
    expect((await signIn('labeler@lab.example', 'not this one at all')).status).toBe(401);
  });

  test('an address that the caller claims does not help against waiting', async () => {
    const claim = (address: string) =>
      signIn('curator@lab.example', 'not this one at all').set('X-Forwarded-For', address);
    for (let attempt = 1; attempt <= 10; attempt += 1) await claim(`203.0.113.${attempt}`);
    expect((await claim('203.0.113.99')).status).toBe(429);
  });

  test('checks one hash whether the account exists or not, so that both take the same time', async () => {
    const checked: string[] = [];
    const { hasher } = app.deps;
    const counting = createDeps({
      ...app.deps,
      hasher: {
        hash: (password) => hasher.hash(password),
        verify: (hash, password) => {
          checked.push(hash);
          return hasher.verify(hash, password);
        },
      },
    });
    const input = (email: string) => ({ email, password: 'not this one at all' });
    await expect(counting.services.sessions.signIn(input('curator@lab.example'), 'test')).rejects.toThrow();
    await expect(counting.services.sessions.signIn(input('nobody@lab.example'), 'test')).rejects.toThrow();
    expect(checked).toHaveLength(2);
    expect(checked[1]).toHaveLength(checked[0]?.length ?? 0);
  });

  test('an audit row tells of it', async () => {
    await signIn('curator@lab.example', testPassword);
    const rows = await app.as('administrator').get('/api/audit?action=session.started&limit=1');
    expect(rows.body.items[0]).toMatchObject({ personName: 'Test curator', subjectType: 'Session' });
  });
});

describe('a session', () => {
  test('ends at once when the person signs out', async () => {
    const cookie = cookieOf(await signIn('curator@lab.example', testPassword));
    const signOut = supertest(app.http).delete('/api/sessions/current').set('Cookie', cookie);
    expect((await signOut.set('Origin', app.deps.config.publicUrl)).status).toBe(204);
    expect((await whoAmI(cookie)).body).toEqual({ user: null });
  });

  test('ends at once when the person is disabled, and stays ended when enabled again', async () => {
    const set = (disabled: boolean) =>
      app.as('administrator').patch(`/api/people/${app.personIds.curator}`).send({ disabled });
    expect((await set(true)).status).toBe(200);
    expect((await app.as('curator').get('/api/sessions')).status).toBe(401);
    await set(false);
    expect((await app.as('curator').get('/api/sessions')).status).toBe(401);
  });

  test('has the roles of now, not those of the sign-in', async () => {
    write(app.deps.db, (tx) => replaceRoles(tx, app.personIds.administrator, ['labeler']));
    expect((await app.as('administrator').get('/api/people')).status).toBe(404);
  });

  test('is over after thirty minutes without a request', async () => {
    app.clock.advance(30 * minuteMs);
    expect((await app.as('curator').get('/api/sessions')).status).toBe(401);
  });

  test('goes on while it is in use, with a fresh cookie after five minutes', async () => {
    expect((await app.as('curator').get('/api/sessions')).get('Set-Cookie')).toBeUndefined();
    app.clock.advance(6 * minuteMs);
    const answer = await app.as('curator').get('/api/sessions');
    const fresh = cookieOf(answer);
    app.clock.advance(26 * minuteMs);
    expect((await whoAmI(fresh)).body.user.id).toBe(app.personIds.curator);
  });

  test('of an open page that nobody uses ends after twelve hours', async () => {
    let cookie = cookieOf(await signIn('curator@lab.example', testPassword));
    for (let passedMs = 0; passedMs < 12 * hourMs - 20 * minuteMs; passedMs += 20 * minuteMs) {
      app.clock.advance(20 * minuteMs);
      const answer = await whoAmI(cookie);
      expect(answer.body.user).not.toBeNull();
      cookie = cookieOf(answer);
    }
    app.clock.advance(20 * minuteMs);
    expect((await whoAmI(cookie)).body.user).toBeNull();
  });

  test('ends after seven days, however much it is used', async () => {
    let cookie = cookieOf(await signIn('curator@lab.example', testPassword));
    const list = () => supertest(app.http).get('/api/sessions').set('Cookie', cookie);
    for (let passedMs = 0; passedMs < 7 * 24 * hourMs - 29 * minuteMs; passedMs += 29 * minuteMs) {
      app.clock.advance(29 * minuteMs);
      const answer = await list();
      expect(answer.status).toBe(200);
      cookie = cookieOf(answer);
    }
    app.clock.advance(29 * minuteMs);
    expect((await list()).status).toBe(401);
  });

  test('of one person is neither seen nor ended by another', async () => {
    const own = await app.as('curator').get('/api/sessions');
    expect(own.body.items).toMatchObject([{ userAgent: 'test', current: true }]);
    const answer = await app.as('labeler').delete(`/api/sessions/${own.body.items[0].id}`);
    expect(answer.status).toBe(404);
    expect((await app.as('curator').get('/api/sessions')).status).toBe(200);
  });
});

describe('a personal token', () => {
  const create = () =>
    app.as('curator').post('/api/tokens').send({ name: 'night script', expiresInDays: 30 });
  const use = (token: string) =>
    supertest(app.http).get('/api/sessions').set('Authorization', `Bearer ${token}`);

  test('acts as the person, and only its hash is kept', async () => {
    const { token } = (await create()).body;
    expect((await use(token)).status).toBe(200);
    expect(JSON.stringify(app.deps.db.$client.prepare('select * from api_tokens').all())).not.toContain(
      token,
    );
    expect((await app.as('curator').get('/api/tokens')).text).not.toContain(token);
  });

  test('needs no origin, since browsers do not send it by themselves', async () => {
    const { token } = (await create()).body;
    const post = supertest(app.http).post('/api/tokens').set('Authorization', `Bearer ${token}`);
    expect((await post.send({ name: 'second' })).status).toBe(201);
  });

  test('is refused once revoked', async () => {
    const { token, id } = (await create()).body;
    await app.as('curator').delete(`/api/tokens/${id}`);
    expect((await use(token)).status).toBe(401);
  });

  test('is refused once its time is over', async () => {
    const { token } = (await create()).body;
    app.clock.advance(30 * 24 * hourMs);
    expect((await use(token)).status).toBe(401);
  });

  test('is refused once the person is disabled', async () => {
    const { token } = (await create()).body;
    updateUser(app.deps.db, app.personIds.curator, { disabled: true });
    expect((await use(token)).status).toBe(401);
  });

  test.each(['Bearer x', 'Basic Y3VyYXRvcjpwYXNz', 'Bearer', `Bearer rcl_${'a'.repeat(43)}`])(
    'an authorization that is none is refused even where anybody may ask: %s',
    async (authorization) => {
      const answer = await supertest(app.http)
        .get('/api/sessions/current')
        .set('Authorization', authorization);
      expect(answer.status).toBe(401);
      expect(answer.get('WWW-Authenticate')).toContain('Bearer');
    },
  );
});

describe('changing the password', () => {
  const newPassword = 'four amber rivers bend';
  const change = (cookie: string, currentPassword: string, next = newPassword) =>
    supertest(app.http)
      .put('/api/password')
      .set({ Cookie: cookie, Origin: app.deps.config.publicUrl })
      .send({ currentPassword, newPassword: next });

  test('takes the new one from then on, and ends every other session', async () => {
    const here = cookieOf(await signIn('curator@lab.example', testPassword));
    const elsewhere = cookieOf(await signIn('curator@lab.example', testPassword));
    expect((await change(here, testPassword)).status).toBe(204);
    expect((await whoAmI(here)).body.user).not.toBeNull();
    expect((await whoAmI(elsewhere)).body.user).toBeNull();
    expect((await signIn('curator@lab.example', testPassword)).status).toBe(401);
    expect((await signIn('curator@lab.example', newPassword)).status).toBe(201);
  });

  test('needs the present one', async () => {
    const here = cookieOf(await signIn('curator@lab.example', testPassword));
    const answer = await change(here, 'something else entirely');
    expect(answer.status).toBe(422);
    expect(answer.body.fields).toEqual([expect.objectContaining({ path: 'currentPassword' })]);
  });

  test('refuses one that is tried first, at its field', async () => {
    const here = cookieOf(await signIn('curator@lab.example', testPassword));
    const answer = await change(here, testPassword, 'password1234567');
    expect(answer.body.fields).toEqual([expect.objectContaining({ path: 'newPassword' })]);
  });

  test('is not for scripts', async () => {
    const { body } = await app.as('curator').post('/api/tokens').send({ name: 'script' });
    const answer = await supertest(app.http)
      .put('/api/password')
      .set('Authorization', `Bearer ${body.token}`)
      .send({ currentPassword: testPassword, newPassword });
    expect(answer.status).toBe(403);
  });
});
