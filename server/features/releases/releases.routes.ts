import path from 'node:path';
import { gatesSchema } from '../../../shared/contract/collections.ts';
import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  createReleaseSchema,
  listReleasesQuerySchema,
  releaseSchema,
  releasesPageSchema,
  withdrawSchema,
} from '../../../shared/contract/releases.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { sendFile, toDisposition } from '../../http/send-file.ts';

export function releasesRoutes(deps: Deps): Route[] {
  return [...preparationRoutes(deps), ...publicRoutes(deps)];
}

function preparationRoutes({ services: { releases } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/collections/:id/gates',
      summary: 'What still forbids a release, and the smallest version the next one may have.',
      access: 'signed-in',
      params: idParamsSchema,
      response: gatesSchema,
      handler: ({ actor, params }) => releases.gates(actor, params.id),
    }),
    defineRoute({
      method: 'post',
      path: '/api/collections/:id/releases',
      summary: 'Freezes the collection and builds its archive.',
      access: 'signed-in',
      status: 201,
      params: idParamsSchema,
      body: createReleaseSchema,
      response: releaseSchema,
      handler: ({ actor, params, body }) => releases.create(actor, params.id, body),
    }),
    defineRoute({
      method: 'post',
      path: '/api/releases/:id/publish',
      summary: 'Publishes a built and verified release; from then on it never changes.',
      access: 'signed-in',
      params: idParamsSchema,
      response: releaseSchema,
      handler: ({ actor, params }) => releases.publish(actor, params.id),
    }),
    defineRoute({
      method: 'post',
      path: '/api/releases/:id/withdraw',
      summary: 'Withdraws a published release with a reason; its page and checksums stay.',
      access: 'signed-in',
      params: idParamsSchema,
      body: withdrawSchema,
      response: releaseSchema,
      handler: ({ actor, params, body }) => releases.withdraw(actor, params.id, body.reason),
    }),
  ];
}

function publicRoutes({ services: { releases }, config }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/releases',
      summary: 'Published releases; for curators those in preparation too.',
      access: 'public',
      query: listReleasesQuerySchema,
      response: releasesPageSchema,
      handler: ({ actor, query }) => releases.list(actor, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/releases/:id',
      summary: 'One release with its files, checksums and citation.',
      access: 'public',
      params: idParamsSchema,
      response: releaseSchema,
      handler: ({ actor, params }) => releases.get(actor, params.id),
    }),
    defineRoute({
      method: 'get',
      path: '/api/releases/:id/archive',
      summary: 'The archive; takes Range and If-Range.',
      access: 'public',
      params: idParamsSchema,
      produces: 'application/zip',
      handler: async ({ actor, params, res }) => {
        const { fileName, sha256 } = releases.requireArchive(actor, params.id);
        // RFC 9530, section 3: the digest of the whole representation, also where a range of it is sent.
        res.setHeader('Repr-Digest', `sha-256=:${Buffer.from(sha256, 'hex').toString('base64')}:`);
        await sendFile(res, {
          path: path.join(config.paths.archives, fileName),
          contentType: 'application/zip',
          etag: sha256,
          downloadName: fileName,
          cacheControl: 'private, no-cache',
        });
      },
    }),
    defineRoute({
      method: 'get',
      path: '/api/releases/:id/archive.sha256',
      summary: 'Checksum of the archive, as `sha256sum -c` reads it.',
      access: 'public',
      params: idParamsSchema,
      produces: 'text/plain',
      handler: ({ actor, params, res }) => {
        const { fileName, sha256 } = releases.requireArchive(actor, params.id);
        res.type('text/plain').setHeader('Content-Disposition', toDisposition(`${fileName}.sha256`));
        res.send(`${sha256}  ${fileName}\n`);
      },
    }),
  ];
}
