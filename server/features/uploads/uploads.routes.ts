import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  broughtInSchema,
  completeUploadSchema,
  createUploadSchema,
  createdUploadSchema,
  uploadsSchema,
} from '../../../shared/contract/uploads.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readDeclaration } from './form-declaration.ts';
import { receiveForm } from './multipart-form.ts';
import { bytesPath, createTusBytes } from './tus-bytes.ts';

export function uploadsRoutes(deps: Deps): Route[] {
  const { uploads, completion } = deps.services;
  return [
    ...bytesRoutes(deps),
    defineRoute({
      method: 'post',
      path: '/api/uploads',
      summary:
        'Announces a file; its bytes follow by tus at /api/uploads/bytes, with the uploadId in the metadata.',
      access: 'signed-in',
      status: 201,
      body: createUploadSchema,
      response: createdUploadSchema,
      handler: ({ actor, body }) => uploads.create(actor, body),
    }),
    defineRoute({
      method: 'get',
      path: '/api/uploads',
      summary: 'Uploads of the person that are not finished, with the bytes that have arrived.',
      access: 'signed-in',
      response: uploadsSchema,
      handler: ({ actor }) => uploads.listOpen(actor),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/uploads/:id',
      summary: 'Cancels an upload and removes its bytes.',
      access: 'signed-in',
      status: 204,
      params: idParamsSchema,
      handler: ({ actor, params }) => uploads.cancel(actor, params.id),
    }),
    defineRoute({
      method: 'post',
      path: '/api/uploads/:id/complete',
      summary: 'Checks the bytes and makes a recording of them; asked again, it answers the same recording.',
      access: 'signed-in',
      params: idParamsSchema,
      body: completeUploadSchema,
      response: broughtInSchema,
      handler: async ({ actor, params, body }) => ({
        recording: await completion.complete(actor, params.id, body.sha256),
      }),
    }),
    formRoute(deps),
  ];
}

function bytesRoutes({ services, log }: Deps): Route[] {
  const tus = createTusBytes({ uploads: services.uploads, folder: services.uploadFolder, log });
  const one = `${bytesPath}/:id`;
  return [
    defineRoute({
      method: 'post',
      path: bytesPath,
      summary: 'tus 1.0: creates the byte stream of an announced upload.',
      access: 'signed-in',
      handler: (exchange) => tus.create(exchange),
    }),
    defineRoute({
      method: 'head',
      path: one,
      summary: 'tus 1.0: tells how many bytes have arrived.',
      access: 'signed-in',
      params: idParamsSchema,
      handler: (exchange) => tus.head(exchange, exchange.params.id),
    }),
    defineRoute({
      method: 'patch',
      path: one,
      summary: 'tus 1.0: takes the next bytes.',
      access: 'signed-in',
      params: idParamsSchema,
      handler: (exchange) => tus.patch(exchange, exchange.params.id),
    }),
    defineRoute({
      method: 'options',
      path: bytesPath,
      summary: 'tus 1.0: tells version, extensions and the largest size.',
      access: 'public',
      status: 204,
      handler: ({ res }) => tus.describe(res),
    }),
  ];
}

function formRoute({ services }: Deps): Route {
  const { singleRequest } = services;
  return defineRoute({
    method: 'post',
    path: '/api/runs/:id/recordings',
    summary: 'Brings in a recording in one multipart form: the part file, and the declaration as fields.',
    access: 'signed-in',
    status: 201,
    params: idParamsSchema,
    response: broughtInSchema,
    handler: async ({ actor, params, req }) => {
      const announcedBytes = Number(req.headers['content-length'] ?? 0);
      const { name, path } = await singleRequest.admit(actor, params.id, announcedBytes);
      try {
        const { fields, file } = await receiveForm(req, path);
        const { sha256, ...declaration } = readDeclaration(fields);
        const brought = { ...file, path, sha256, declaration };
        return { recording: await singleRequest.bringIn(actor, params.id, brought) };
      } finally {
        await singleRequest.remove(name);
      }
    },
  });
}
