import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  createdTraceSchema,
  patchTraceSchema,
  recalescencesSchema,
  tracePointsQuerySchema,
  tracePointsSchema,
  traceSchema,
  tracesSchema,
} from '../../../shared/contract/traces.ts';
import { maximumTraceBytes } from '../../../shared/domain/trace-table.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readIfMatch, withRevision } from '../../http/revision.ts';
import { sendFile } from '../../http/send-file.ts';
import { receiveForm } from '../uploads/multipart-form.ts';
import { readTraceForm } from './trace-form.ts';

export function tracesRoutes(deps: Deps): Route[] {
  return [...ofRun(deps), ...ofTrace(deps), ...contentOf(deps)];
}

function ofRun({ services: { traces } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/runs/:id/traces',
      summary: 'Traces of temperature, pressure or current beside the sound of a run.',
      access: 'signed-in',
      params: idParamsSchema,
      response: tracesSchema,
      handler: ({ actor, params }) => traces.list(actor, params.id),
    }),
    defineRoute({
      method: 'post',
      path: '/api/runs/:id/traces',
      summary:
        'Adds a table of times and values in a multipart form: the part file, and JSON with its columns in the field trace.',
      access: 'signed-in',
      status: 201,
      params: idParamsSchema,
      response: createdTraceSchema,
      handler: async ({ actor, params, req, res }) => {
        const announcedBytes = Number(req.headers['content-length'] ?? 0);
        const { name, path } = await traces.admit(actor, params.id, announcedBytes);
        try {
          const { fields, file } = await receiveForm(req, path, maximumTraceBytes);
          const trace = readTraceForm(fields);
          return withRevision(res, await traces.create(actor, params.id, { ...file, path, trace }));
        } finally {
          await traces.removeFile(name);
        }
      },
    }),
  ];
}

function ofTrace({ services: { traces } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/traces/:id',
      summary: 'One trace, without its points.',
      access: 'signed-in',
      params: idParamsSchema,
      response: traceSchema,
      handler: ({ actor, params, res }) => withRevision(res, traces.get(actor, params.id)),
    }),
    defineRoute({
      method: 'patch',
      path: '/api/traces/:id',
      summary: 'Changes name, quantity, unit or place on the clock of the run; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: patchTraceSchema,
      response: traceSchema,
      handler: ({ actor, params, body, req, res }) =>
        withRevision(res, traces.change(actor, params.id, readIfMatch({ req }), body)),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/traces/:id',
      summary: 'Removes a trace; needs If-Match. It can be restored under the next revision.',
      access: 'signed-in',
      status: 204,
      params: idParamsSchema,
      handler: ({ actor, params, req }) => traces.remove(actor, params.id, readIfMatch({ req })),
    }),
    defineRoute({
      method: 'post',
      path: '/api/traces/:id/restore',
      summary: 'Takes the removal of a trace back; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      response: traceSchema,
      handler: ({ actor, params, req, res }) =>
        withRevision(res, traces.restore(actor, params.id, readIfMatch({ req }))),
    }),
  ];
}

function contentOf({ services: { traces, tracePoints } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/traces/:id/points',
      summary: 'Points of a trace in run time; of many, least and greatest of each step.',
      access: 'signed-in',
      params: idParamsSchema,
      query: tracePointsQuerySchema,
      response: tracePointsSchema,
      handler: ({ actor, params, query }) => tracePoints.points(actor, params.id, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/traces/:id/recalescence',
      summary: 'Where a temperature jumps back towards the melting point, offered for a person to judge.',
      access: 'signed-in',
      params: idParamsSchema,
      response: recalescencesSchema,
      handler: ({ actor, params }) => tracePoints.recalescence(actor, params.id),
    }),
    defineRoute({
      method: 'get',
      path: '/api/traces/:id/file',
      summary: 'The table as it came.',
      access: 'signed-in',
      produces: 'text/csv',
      params: idParamsSchema,
      handler: ({ actor, params, res }) => {
        const { path, sha256, fileName } = traces.file(actor, params.id);
        return sendFile(res, {
          path,
          contentType: 'text/csv',
          etag: sha256,
          downloadName: fileName,
          cacheControl: 'private, no-cache',
        });
      },
    }),
  ];
}
