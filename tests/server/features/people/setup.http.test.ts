import supertest from 'supertest';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createApp } from '../../../../server/app.ts';
import { createDeps, type Deps } from '../../../../server/deps.ts';
import { createTestGround, type TestGround } from '../../../support/server/test-ground.ts';

const hourMs = 3_600_000;
const person = { name: 'Ines Okafor', email: 'ines@lab.example', password: 'slow copper rain window' };

let ground: TestGround;
let deps: Deps;
beforeEach(() => {
  ground = createTestGround();
  deps = createDeps(ground);
});
afterEach(() => ground.close());

function createLink(): string {
  const link = deps.services.setup.createLink();
  if (link === null) throw new Error('There was no link.');
  return new URL(link).searchParams.get('token') ?? '';
}

const setUp = (token: string) =>
  supertest(createApp(deps))
    .post('/api/setup')
    .send({ ...person, token });

describe('the link of the first start', () => {
  test('makes the first administrator and signs in', async () => {
    const answer = await setUp(createLink());
    expect(answer.status).toBe(201);
    expect(answer.body.user).toMatchObject({ email: 'ines@lab.example', roles: ['administrator'] });
    expect(answer.get('Set-Cookie')?.[0]).toContain('HttpOnly');
  });

  test('is good once, and there is no other once somebody is there', async () => {
    const token = createLink();
    await setUp(token);
    expect((await setUp(token)).status).toBe(410);
    expect(deps.services.setup.createLink()).toBeNull();
  });

  test('makes one administrator also when it is used twice at the same time', async () => {
    const token = createLink();
    const statuses = (await Promise.all([setUp(token), setUp(token)])).map(({ status }) => status);
    expect(statuses.sort()).toEqual([201, 410]);
  });

  test('is replaced at the next start', async () => {
    const first = createLink();
    const second = createLink();
    expect((await setUp(first)).status).toBe(404);
    expect((await setUp(second)).status).toBe(201);
  });

  test('is over after a day', async () => {
    const token = createLink();
    ground.clock.advance(24 * hourMs);
    expect((await setUp(token)).status).toBe(410);
  });

  test('is kept as a hash', () => {
    const token = createLink();
    expect(JSON.stringify(ground.db.$client.prepare('select * from setup_tokens').all())).not.toContain(
      token,
    );
  });
});
