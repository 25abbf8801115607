import type { AudioContainer } from '../../../shared/audio/audio-format.ts';
import { FILE_KINDS } from '../../../shared/audio/file-kind.ts';
import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  captureSegmentsSchema,
  listRecordingsQuerySchema,
  recordingSchema,
  recordingsPageSchema,
} from '../../../shared/contract/recordings.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { withRevision } from '../../http/revision.ts';
import { sendFile } from '../../http/send-file.ts';
import { requireSound } from './recordings.service.ts';

export function recordingsRoutes({ services, store }: Deps): Route[] {
  const { recordings, measuringRequests } = services;
  return [
    defineRoute({
      method: 'get',
      path: '/api/recordings',
      summary: 'Recordings that the person may see, filtered, newest first.',
      access: 'signed-in',
      query: listRecordingsQuerySchema,
      response: recordingsPageSchema,
      handler: ({ actor, query }) => recordings.list(actor, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id',
      summary: 'One recording with its format, measurement and states.',
      access: 'signed-in',
      params: idParamsSchema,
      response: recordingSchema,
      handler: ({ actor, params, res }) => withRevision(res, recordings.get(actor, params.id)),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/segments',
      summary: 'Of a capture set: where its triggered segments lie, and when they were taken.',
      access: 'signed-in',
      params: idParamsSchema,
      response: captureSegmentsSchema,
      handler: ({ actor, params }) => recordings.listSegments(actor, params.id),
    }),
    defineRoute({
      method: 'post',
      path: '/api/recordings/:id/measure',
      summary: 'Measures a recording again, after a failure, a stop, or with a newer detector; marks stay.',
      access: 'signed-in',
      status: 202,
      params: idParamsSchema,
      response: recordingSchema,
      handler: ({ actor, params }) => measuringRequests.measureAgain(actor, params.id),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/recordings/:id/measure',
      summary: 'Stops a measurement that waits or runs; what is finished of it is kept.',
      access: 'signed-in',
      status: 200,
      params: idParamsSchema,
      response: recordingSchema,
      handler: ({ actor, params }) => measuringRequests.stop(actor, params.id),
    }),
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/audio',
      summary: 'The bytes as they were brought in; takes ranges.',
      access: 'signed-in',
      produces: 'audio/wav',
      params: idParamsSchema,
      handler: ({ actor, params, res }) => {
        const { row } = requireSound(recordings.requireVisible(actor, params.id));
        const kept = { etag: row.sha256, cacheControl: 'private, no-cache' };
        const contentType = contentTypeOf(row.format.container);
        const file = { path: store.pathOf(row.sha256), contentType, downloadName: row.fileName };
        return sendFile(res, { ...file, ...kept });
      },
    }),
  ];
}

/** Browsers know WAV by a name of its own. */
function contentTypeOf(container: AudioContainer): string {
  const { extension, mediaType } = FILE_KINDS[container];
  return extension === 'wav' ? 'audio/wav' : mediaType;
}
