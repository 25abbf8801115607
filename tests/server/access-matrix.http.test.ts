import type { IncomingMessage } from 'node:http';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { allRoutes } from '../../server/all-routes.ts';
import { allRows } from '../support/access-matrix/all-rows.ts';
import type { CellRequest, MatrixRow } from '../support/access-matrix/matrix-row.ts';
import { actorNames, type ActorName } from '../support/server/seed-actors.ts';
import { createTestApp, type TestApp } from '../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

describe('the access matrix is complete', () => {
  test('each registered route has a row', () => {
    const known = new Set(allRows.map((row) => row.route));
    expect(routeNames().filter((name) => !known.has(name))).toEqual([]);
  });

  test('each row has a registered route', () => {
    const registered = new Set(routeNames());
    expect(allRows.map((row) => row.route).filter((name) => !registered.has(name))).toEqual([]);
  });
});

describe.each(allRows.map((row) => ({ title: [row.route, row.state].filter(Boolean).join(', '), row })))(
  '$title',
  ({ row }) => {
    /** Objects that do not depend on the actor are made once for the row. */
    let common: CellRequest | null = null;
    beforeAll(async () => {
      app.deps.db.$client.exec('SAVEPOINT matrix_row');
      common = row.prepare.length < 2 ? await row.prepare(app, 'anonymous') : null;
    });
    afterAll(() => undo('matrix_row'));

    test.each([...actorNames])('%s', async (actor) => {
      const answer = await undone(async () => send(row, actor, common ?? (await row.prepare(app, actor))));
      const expected = row.expected[actor];
      // An answer to HEAD has no body, whatever it says.
      const isTold = expected >= 400 && !row.route.startsWith('HEAD ');
      expect({ status: answer.status, body: isTold ? answer.body : undefined }).toEqual({
        status: expected,
        body: isTold ? problemOf(expected) : undefined,
      });
    });
  },
);

function routeNames(): string[] {
  return allRoutes(app.deps).map((route) => `${route.method.toUpperCase()} ${route.path}`);
}

function problemOf(status: number): unknown {
  return expect.objectContaining({ status, code: expect.any(String), requestId: expect.any(String) });
}

/** Every cell starts from the same database: what it changed is taken back. */
async function undone<Result>(work: () => Promise<Result>): Promise<Result> {
  app.deps.db.$client.exec('SAVEPOINT matrix_cell');
  try {
    return await work();
  } finally {
    undo('matrix_cell');
  }
}

function undo(savepoint: string): void {
  app.deps.db.$client.exec(`ROLLBACK TO ${savepoint}; RELEASE ${savepoint}`);
}

async function send(row: MatrixRow, actor: ActorName, { path, body, headers = {} }: CellRequest) {
  const method = row.route.slice(0, row.route.indexOf(' ')).toLowerCase();
  const request = requestOf(actor, method, path).set(headers);
  if (row.endless === true && row.expected[actor] < 400) return request.buffer(false).parse(stopAtOnce);
  return body === undefined ? request : request.send(body);
}

function requestOf(actor: ActorName, method: string, path: string) {
  const agent = app.as(actor);
  switch (method) {
    case 'get':
      return agent.get(path);
    case 'head':
      return agent.head(path);
    case 'options':
      return agent.options(path);
    case 'post':
      return agent.post(path);
    case 'put':
      return agent.put(path);
    case 'patch':
      return agent.patch(path);
    case 'delete':
      return agent.delete(path);
    default:
      throw new RangeError(`method must be one that routes have, not ${method}`);
  }
}

function stopAtOnce(response: unknown, done: (error: Error | null, body: unknown) => void): void {
  (response as IncomingMessage).destroy();
  done(null, '');
}
