import { rm } from 'node:fs/promises';
import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  addedVideoSchema,
  addVideoQuerySchema,
  filmQuerySchema,
  patchVideoSchema,
  videoSchema,
  videosSchema,
} from '../../../shared/contract/videos.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readIfMatch, withRevision } from '../../http/revision.ts';
import { sendFile } from '../../http/send-file.ts';
import { announcedFilmBytes, receiveFilm } from './receive-film.ts';

export function videosRoutes(deps: Deps): Route[] {
  const { videos } = deps.services;
  return [
    defineRoute({
      method: 'get',
      path: '/api/runs/:id/videos',
      summary: 'Films of a run that the person may see; none for whoever works blind.',
      access: 'signed-in',
      params: idParamsSchema,
      response: videosSchema,
      handler: ({ actor, params }) => videos.list(actor, params.id),
    }),
    addRoute(deps),
    defineRoute({
      method: 'patch',
      path: '/api/videos/:id',
      summary: 'Places a film on the clock of its run; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: patchVideoSchema,
      response: videoSchema,
      handler: ({ actor, params, body, req, res }) =>
        withRevision(res, videos.patch(actor, params.id, body, readIfMatch({ req }))),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/videos/:id',
      summary: 'Removes a film from its run; needs If-Match.',
      access: 'signed-in',
      status: 204,
      params: idParamsSchema,
      handler: ({ actor, params, req }) => videos.remove(actor, params.id, readIfMatch({ req })),
    }),
    defineRoute({
      method: 'post',
      path: '/api/videos/:id/restore',
      summary: 'Takes the removal of a film back; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      response: videoSchema,
      handler: ({ actor, params, req, res }) =>
        withRevision(res, videos.restore(actor, params.id, readIfMatch({ req }))),
    }),
    filmRoute(deps),
  ];
}

function addRoute({ services: { videos } }: Deps): Route {
  return defineRoute({
    method: 'post',
    path: '/api/runs/:id/videos',
    summary: 'Brings in a film, MP4 or WebM, as the body of the request; a sound track is left out.',
    access: 'signed-in',
    status: 201,
    params: idParamsSchema,
    query: addVideoQuerySchema,
    response: addedVideoSchema,
    handler: async ({ actor, params, query, req, res }) => {
      const path = await videos.admit(actor, params.id, announcedFilmBytes(req));
      try {
        await receiveFilm(req, path);
        return withRevision(res, await videos.bringIn(actor, params.id, { path, fileName: query.fileName }));
      } finally {
        await rm(path, { force: true });
      }
    },
  });
}

function filmRoute({ services: { videos } }: Deps): Route {
  return defineRoute({
    method: 'get',
    path: '/api/videos/:id/film',
    summary: 'The film, with ranges.',
    access: 'signed-in',
    produces: 'video/mp4, video/webm',
    params: idParamsSchema,
    query: filmQuerySchema,
    handler: ({ actor, params, query, res }) => {
      const { path, row } = videos.film(actor, params.id);
      return sendFile(res, {
        path,
        contentType: row.container === 'mp4' ? 'video/mp4' : 'video/webm',
        etag: row.sha256,
        cacheControl: 'private, no-cache',
        ...(query.download ? { downloadName: row.fileName } : {}),
      });
    },
  });
}
