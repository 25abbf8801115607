import { z } from 'zod';
import { problemSchema } from '../../shared/contract/problem.ts';
import type { Route } from './define-route.ts';

type JsonObject = Record<string, unknown>;

/** OpenAPI 3.1 from the same schemas that check requests and answers. */
export function describeRoutes(routes: readonly Route[], publicUrl: string): JsonObject {
  const paths: Record<string, JsonObject> = {};
  for (const route of routes) {
    const path = toTemplate(route.path);
    paths[path] = { ...paths[path], [route.method]: describe(route) };
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Recalesce',
      version: '1',
      description: 'Recordings of solidification: bring in, measure, mark, release. Errors follow RFC 9457.',
    },
    servers: [{ url: publicUrl }],
    paths,
    components: {
      schemas: { Problem: toJsonSchema(problemSchema, 'output') },
      securitySchemes: {
        token: { type: 'http', scheme: 'bearer', description: 'A personal token, for scripts.' },
      },
    },
  };
}

function describe(route: Route): JsonObject {
  return {
    summary: route.summary,
    security: route.access === 'public' ? [] : [{ token: [] }],
    parameters: [...parametersOf(route.params, 'path'), ...parametersOf(route.query, 'query')],
    ...(route.body === undefined
      ? {}
      : { requestBody: { required: true, content: jsonContent(toJsonSchema(route.body, 'input')) } }),
    responses: { [String(route.status ?? 200)]: success(route), default: problemResponse },
  };
}

const problemResponse = {
  description: 'A problem, in words.',
  content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
};

function success(route: Route): JsonObject {
  const description = route.status === 204 ? 'Done.' : 'Success.';
  if (route.response !== undefined) {
    return { description, content: jsonContent(toJsonSchema(route.response, 'output')) };
  }
  return route.produces === undefined ? { description } : { description, content: { [route.produces]: {} } };
}

function jsonContent(schema: JsonObject): JsonObject {
  return { 'application/json': { schema } };
}

function parametersOf(schema: z.ZodType | undefined, place: 'path' | 'query'): JsonObject[] {
  if (schema === undefined) return [];
  const json = toJsonSchema(schema, 'input');
  const properties =
    typeof json['properties'] === 'object' && json['properties'] !== null ? json['properties'] : {};
  const required = Array.isArray(json['required']) ? json['required'] : [];
  return Object.entries(properties).map(([name, property]) => ({
    name,
    in: place,
    required: place === 'path' || required.includes(name),
    schema: property,
  }));
}

function toJsonSchema(schema: z.ZodType, io: 'input' | 'output'): JsonObject {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, {
    io,
    unrepresentable: 'any',
    reused: 'inline',
  });
  return rest;
}

function toTemplate(path: string): string {
  return path.replace(/[:*](\w+)/g, '{$1}');
}
