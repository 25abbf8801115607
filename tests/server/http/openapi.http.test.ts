import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { allRoutes } from '../../../server/all-routes.ts';
import { createTestApp, type TestApp } from '../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

describe('the description of the interface', () => {
  test('holds every route, with the problem for whatever goes wrong', async () => {
    const { body } = await app.as('anonymous').get('/api/openapi.json');
    expect(body.openapi).toBe('3.1.0');
    for (const route of allRoutes(app.deps)) {
      const operation = body.paths[route.path.replace(/[:*](\w+)/g, '{$1}')]?.[route.method];
      expect(operation, `${route.method} ${route.path}`).toMatchObject({ summary: route.summary });
      expect(operation.responses.default.content['application/problem+json']).toBeDefined();
    }
  });

  test('tells path and query parameters and the fields of a body', async () => {
    const { body } = await app.as('anonymous').get('/api/openapi.json');
    const patch = body.paths['/api/people/{id}'].patch;
    expect(patch.parameters).toMatchObject([{ name: 'id', in: 'path', required: true }]);
    expect(patch.requestBody.content['application/json'].schema.properties).toHaveProperty('disabled');
    const query = body.paths['/api/audit'].get.parameters.map(({ name }: { name: string }) => name);
    expect(query).toEqual(expect.arrayContaining(['cursor', 'limit', 'action']));
  });

  test('has a plain page of its own that needs no script', async () => {
    const answer = await app.as('anonymous').get('/api/docs');
    expect(answer.type).toBe('text/html');
    expect(answer.text).toContain('/api/people/:id');
    expect(answer.text).not.toContain('<script');
  });
});
