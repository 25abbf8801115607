import express from 'express';
import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { z } from 'zod';
import { problemSchema } from '../../../shared/contract/problem.ts';
import { defineRoute } from '../../../server/http/define-route.ts';
import { mountRoutes } from '../../../server/http/mount-routes.ts';
import { problemHandler } from '../../../server/http/problem-handler.ts';
import { requestLog } from '../../../server/http/request-log.ts';
import { createLog } from '../../../server/log.ts';
import { createTestApp, type TestApp } from '../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const administrator = () => app.as('administrator');

describe('a problem', () => {
  test('of an unknown address is JSON, never the page of the client', async () => {
    const answer = await app.as('anonymous').get('/api/nothing/here');
    expect(answer.status).toBe(404);
    expect(answer.type).toBe('application/problem+json');
    expect(problemSchema.parse(answer.body)).toMatchObject({ code: 'not-found', status: 404, fields: [] });
  });

  test('carries the request id that the answer and the log have', async () => {
    const answer = await app.as('anonymous').get('/api/nothing').set('X-Request-Id', 'of the caller');
    expect(answer.body.requestId).toBe(answer.get('X-Request-Id'));
    expect(answer.body.requestId).not.toBe('of the caller');
  });

  test('of a wrong method says which ones are possible', async () => {
    const answer = await administrator().put('/api/labs').send({});
    expect(answer.status).toBe(405);
    expect(answer.get('Allow')).toBe('GET, POST');
  });

  test('of a body that is no JSON', async () => {
    const answer = await administrator().post('/api/labs').type('application/json').send('{"name":');
    expect(answer.body).toMatchObject({
      status: 400,
      code: 'malformed-request',
      detail: 'The body is not valid JSON.',
    });
  });

  test('of a body in another type', async () => {
    const answer = await administrator().post('/api/labs').type('text/plain').send('{"name":"Third Lab"}');
    expect(answer.body).toMatchObject({ status: 415, code: 'unsupported-type' });
  });

  test('of a body that is too large', async () => {
    const answer = await administrator()
      .post('/api/labs')
      .send({ name: 'x'.repeat(300_000) });
    expect(answer.body).toMatchObject({ status: 413, code: 'too-large' });
  });

  test('of fields names each of them, in words', async () => {
    const answer = await app
      .as('administrator')
      .post('/api/invitations')
      .send({ email: 'x', roles: ['owner'] });
    expect(answer.body).toMatchObject({ status: 422, code: 'invalid-input' });
    expect(answer.body.fields).toEqual([
      { path: 'email', message: 'is not an e-mail address' },
      { path: 'roles.0', message: 'must be one of labeler, curator, administrator' },
    ]);
    expect(answer.body.detail).toBe('Email is not an e-mail address; 1 more to correct.');
  });

  test('of an empty body says what is needed', async () => {
    const answer = await administrator().post('/api/labs').send({});
    expect(answer.body.fields).toEqual([{ path: 'name', message: 'is needed' }]);
  });

  test('of an id that can be none is a missing thing', async () => {
    expect((await administrator().get('/api/people/1')).status).toBe(404);
  });

  test('of a query names the parameter', async () => {
    const answer = await administrator().get('/api/people?limit=1000');
    expect(answer.body.fields).toEqual([{ path: 'limit', message: 'must be at most 200' }]);
  });

  test('of a cursor that no list gave out', async () => {
    for (const cursor of ['x', 'e30', 'MQ']) {
      expect((await administrator().get(`/api/people?cursor=${cursor}`)).status).toBe(422);
    }
  });
});

describe('what nobody expected', () => {
  const lines: string[] = [];
  const failing = (error: Error) => {
    const server = express();
    server.use(requestLog(createLog('info', { write: (line) => void lines.push(line) })));
    const handler = () => {
      throw error;
    };
    mountRoutes(server, [
      defineRoute({ method: 'get', path: '/x', summary: 'Fails.', access: 'public', handler }),
    ]);
    server.use(problemHandler());
    return supertest(server).get('/x');
  };

  test('is logged whole and told without stack, path or SQL', async () => {
    const answer = await failing(new Error("SQLITE_ERROR: no such column near 'x' at /srv/secret/file.ts"));
    expect(answer.status).toBe(500);
    expect(answer.text).not.toMatch(/SQLITE|secret|column|\.ts|at /);
    expect(lines.join('')).toContain('/srv/secret/file.ts');
  });

  test('a full disk is told as such, also where the database found it', async () => {
    const full = Object.assign(new Error('no space'), { code: 'ENOSPC' });
    expect((await failing(full)).body).toMatchObject({ status: 507, code: 'storage-full' });
    const wrapped = new Error('query failed', {
      cause: Object.assign(new Error('full'), { code: 'SQLITE_FULL' }),
    });
    expect((await failing(wrapped)).status).toBe(507);
  });

  test('an answer with a field that the contract does not know loses it', async () => {
    const server = express();
    server.use(requestLog(createLog('silent')));
    const result = { name: 'a', passwordHash: 'secret' };
    const response = z.object({ name: z.string() });
    const route = { method: 'get', path: '/x', summary: 'Tells.', access: 'public', response } as const;
    mountRoutes(server, [defineRoute({ ...route, handler: () => result })]);
    expect((await supertest(server).get('/x')).body).toEqual({ name: 'a' });
  });
});

describe('the log', () => {
  test('hides secrets and escapes what a terminal would obey', async () => {
    const lines: string[] = [];
    const log = createLog('info', { write: (line) => void lines.push(line) });
    log.info({
      password: 'p',
      headers: { authorization: 'Bearer t', cookie: 'c' },
      name: 'a\n\u001b[31m\u009b\u202eb',
    });
    expect(lines).toHaveLength(1);
    expect(lines[0]).not.toMatch(/"p"|Bearer|"c"/);
    const unseen = [...(lines[0] ?? '').trimEnd()].filter((character) => /\p{Cc}|\p{Cf}/u.test(character));
    expect(unseen).toEqual([]);
    expect(JSON.parse(lines[0] ?? '')).toMatchObject({
      password: '[hidden]',
      name: 'a\n\u001b[31m\u009b\u202eb',
    });
  });

  test('never holds the secret part of a one-time link', async () => {
    const lines: string[] = [];
    const server = express();
    server.use(requestLog(createLog('info', { write: (line) => void lines.push(line) })));
    await supertest(server).get('/api/invitations/canary-one/accept');
    await supertest(server).get('/setup?token=canary-two');
    expect(lines).toHaveLength(2);
    expect(lines.join('')).not.toContain('canary');
  });
});
