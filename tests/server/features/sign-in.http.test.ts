import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createTestApp, type TestApp } from '../../support/server/test-app.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

describe('who am I', () => {
  test('nobody is signed in without a cookie, and that is no error', async () => {
    const answer = await app.as('anonymous').get('/api/sessions/current');
    expect(answer.status).toBe(200);
    expect(answer.body).toEqual({ user: null });
  });

  test('a signed-in person sees name, roles and packed rules', async () => {
    const answer = await app.as('curator').get('/api/sessions/current');
    expect(answer.body.user).toMatchObject({ name: 'Test curator', roles: ['curator'] });
    expect(answer.body.user.rules.length).toBeGreaterThan(0);
  });
});
