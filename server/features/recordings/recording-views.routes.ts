import { pipeline } from 'node:stream/promises';
import { idParamsSchema } from '../../../shared/contract/ids.ts';
import { listenQuerySchema, quietSpanSchema } from '../../../shared/contract/listening.ts';
import { regionQuerySchema, regionReportSchema } from '../../../shared/contract/region.ts';
import {
  channelQuerySchema,
  peaksQuerySchema,
  peaksSchema,
  quietLevelsSchema,
  spectrumResponseSchema,
  tileLayoutSchema,
  tileParamsSchema,
} from '../../../shared/contract/views.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { sendBytes, sendMade } from '../../http/send-bytes.ts';
import { toDisposition } from '../../http/send-file.ts';
import { framesCsv } from './frames-csv.ts';

/** In the person's own browser only, and asked for again at each use: rights can end. */
const cacheControl = 'private, no-cache';

export function recordingViewsRoutes(deps: Deps): Route[] {
  const { recordingViews } = deps.services;
  return [
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/peaks',
      summary: 'Least and greatest sample of equal steps of a channel.',
      access: 'signed-in',
      params: idParamsSchema,
      query: peaksQuerySchema,
      response: peaksSchema,
      handler: ({ actor, params, query }) => recordingViews.peaks(actor, params.id, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/spectrogram/layout',
      summary: 'Bands, levels and tiles of the pictures of a recording.',
      access: 'signed-in',
      params: idParamsSchema,
      response: tileLayoutSchema,
      handler: ({ actor, params }) => recordingViews.layout(actor, params.id),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/spectrogram/quiet',
      summary: 'What is quiet in each bin of the pictures of a channel, level by level.',
      access: 'signed-in',
      params: idParamsSchema,
      query: channelQuerySchema,
      response: quietLevelsSchema,
      handler: ({ actor, params, query }) => recordingViews.quiet(actor, params.id, query.channel),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/region',
      summary: 'Levels and spectrum of a span of a channel, and of a quiet stretch beside it.',
      access: 'signed-in',
      params: idParamsSchema,
      query: regionQuerySchema,
      response: regionReportSchema,
      handler: ({ actor, params, query }) => deps.services.regions.measure(actor, params.id, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/spectrum',
      summary: 'Power density of quiet and of active time of a channel.',
      access: 'signed-in',
      params: idParamsSchema,
      query: channelQuerySchema,
      response: spectrumResponseSchema,
      handler: ({ actor, params, query }) => recordingViews.spectrum(actor, params.id, query.channel),
    }),
    tileRoute(deps),
    framesRoute(deps),
    listenRoute(deps),
    quietSpanRoute(deps),
  ];
}

function tileRoute({ services }: Deps): Route {
  const { recordingViews } = services;
  return defineRoute({
    method: 'get',
    path: '/api/recordings/:id/spectrogram/:band/:level/:tile',
    summary: 'One tile of a picture, binary.',
    access: 'signed-in',
    produces: 'application/octet-stream',
    params: tileParamsSchema.extend(idParamsSchema.shape),
    query: channelQuerySchema,
    handler: async ({ actor, params, query, req, res }) => {
      const { id, ...place } = params;
      const access = recordingViews.requireMeasured(actor, id);
      const bytes = await recordingViews.tile(access, { ...place, ...query });
      const etag = [access.measurementId, place.band, place.level, place.tile, query.channel].join('-');
      sendBytes(req, res, { bytes, etag, contentType: 'application/octet-stream', cacheControl });
    },
  });
}

function framesRoute({ services }: Deps): Route {
  const { recordingViews } = services;
  return defineRoute({
    method: 'get',
    path: '/api/recordings/:id/frames.csv',
    summary: 'Descriptors of every frame of a channel, as a table.',
    access: 'signed-in',
    produces: 'text/csv',
    params: idParamsSchema,
    query: channelQuerySchema,
    handler: async ({ actor, params, query, res }) => {
      const access = recordingViews.requireMeasured(actor, params.id);
      const table = await recordingViews.frames(access, query.channel);
      res.setHeader('Content-Type', 'text/csv; charset=utf-8');
      res.setHeader('Cache-Control', cacheControl);
      res.setHeader(
        'Content-Disposition',
        toDisposition(`${access.row.fileName}.channel-${query.channel}.frames.csv`),
      );
      await pipeline(framesCsv(table), res);
    },
  });
}

function listenRoute({ services }: Deps): Route {
  return defineRoute({
    method: 'get',
    path: '/api/recordings/:id/listen',
    summary:
      'A stretch of a channel for the ear as 16-bit WAV at 48 kHz; slowed, shifted and freed of noise where asked; takes ranges.',
    access: 'signed-in',
    produces: 'audio/wav',
    params: idParamsSchema,
    query: listenQuerySchema,
    handler: async ({ actor, params, query, req, res }) => {
      const { etag, make } = await services.listening.listen(actor, params.id, query);
      await sendMade(req, res, { make, etag, contentType: 'audio/wav', cacheControl });
    },
  });
}

function quietSpanRoute({ services }: Deps): Route {
  return defineRoute({
    method: 'get',
    path: '/api/recordings/:id/quiet-span',
    summary: 'A span of a channel that shows its noise, as the machine chooses it for listening.',
    access: 'signed-in',
    params: idParamsSchema,
    query: channelQuerySchema,
    response: quietSpanSchema,
    handler: ({ actor, params, query }) => services.listening.quietSpan(actor, params.id, query.channel),
  });
}
