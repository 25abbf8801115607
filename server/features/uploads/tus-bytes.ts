import type { Request, Response } from 'express';
import { ERRORS, Metadata, Server, TUS_RESUMABLE } from '@tus/server';
import { maximumUploadBytes } from '../../../shared/contract/uploads.ts';
import { idSchema } from '../../../shared/contract/ids.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { ProblemError, invalidField } from '../../http/problem.ts';
import type { Logger } from '../../log.ts';
import { TusStore } from './tus-store.ts';
import type { UploadFolder } from './upload-folder.ts';
import type { UploadsService } from './uploads.service.ts';

interface Exchange {
  actor: Actor;
  req: Request;
  res: Response;
}

interface TusParts {
  uploads: UploadsService;
  folder: UploadFolder;
  log: Logger;
}

export const bytesPath = '/api/uploads/bytes';
const bytesType = 'application/offset+octet-stream';

export type TusBytes = ReturnType<typeof createTusBytes>;

/**
 * tus 1.0, core and creation, over rows of ours: every request is judged here before the package sees it, and the
 * name of the stream is the id of the upload, so that there is one stream for each.
 */
export function createTusBytes({ uploads, folder, log }: TusParts) {
  const server = createServer({ uploads, folder, log });

  async function create({ actor, req, res }: Exchange): Promise<void> {
    if (!speaksTus(req, res)) return;
    const id = announcedId(req);
    const { sizeBytes } = uploads.requireOpenOwn(actor, id);
    requireAnnouncedLength(req, sizeBytes);
    await folder.requireRoom(sizeBytes - (await folder.receivedBytes(id)));
    uploads.keepAlive(id);
    await server.handle(req, res);
  }

  async function head({ actor, req, res }: Exchange, id: string): Promise<void> {
    if (!speaksTus(req, res)) return;
    uploads.requireOpenOwn(actor, id);
    await server.handle(req, res);
  }

  async function patch({ actor, req, res }: Exchange, id: string): Promise<void> {
    if (!speaksTus(req, res)) return;
    uploads.requireOpenOwn(actor, id);
    if (req.headers['content-type'] !== bytesType) {
      throw new ProblemError('unsupported-type', `Bytes come with the content type ${bytesType}.`);
    }
    await folder.requireRoom(Number(req.headers['content-length'] ?? 0));
    uploads.keepAlive(id);
    await server.handle(req, res);
  }

  return { create, head, patch, describe };
}

function createServer({ uploads, folder, log }: TusParts): Server {
  const { findStream } = uploads;
  return new Server({
    path: bytesPath,
    datastore: new TusStore({ pathOf: folder.pathOf, findStream }),
    relativeLocation: true,
    maxSize: maximumUploadBytes,
    // No page of another origin may read an answer.
    allowedOrigins: () => false,
    namingFunction: (_request, metadata) => metadata?.['uploadId'] ?? '',
    getFileIdFromRequest: (request) => new URL(request.url).pathname.split('/').at(-1),
    onResponseError: (_request, error) => {
      if ('status_code' in error) return error;
      log.error({ err: error }, 'upload of bytes failed');
      return { status_code: 500, body: 'The bytes could not be stored.\n' };
    },
  });
}

/** Section 5, "Tus-Resumable": another version is answered with 412 and the version spoken, and is not processed. */
function speaksTus(req: Request, res: Response): boolean {
  res.setHeader('Tus-Resumable', TUS_RESUMABLE);
  if (req.headers['tus-resumable'] === TUS_RESUMABLE) return true;
  res
    .status(412)
    .setHeader('Tus-Version', TUS_RESUMABLE)
    .type('text/plain')
    .send('Only tus 1.0.0 is spoken here.\n');
  return false;
}

function describe(res: Response): void {
  res.setHeader('Tus-Resumable', TUS_RESUMABLE);
  res.setHeader('Tus-Version', TUS_RESUMABLE);
  res.setHeader('Tus-Extension', 'creation');
  res.setHeader('Tus-Max-Size', String(maximumUploadBytes));
}

/** The metadata are typed by whoever sends them: only the id of an upload announced before is taken. */
function announcedId(req: Request): string {
  const parsed = idSchema.safeParse(readMetadata(req)['uploadId']);
  if (!parsed.success)
    throw invalidField('Upload-Metadata', 'must hold the uploadId of an upload announced before');
  return parsed.data;
}

function readMetadata(req: Request): Record<string, string | null> {
  const header = req.headers['upload-metadata'];
  try {
    return Metadata.parse(Array.isArray(header) ? header.join(',') : header);
  } catch {
    throw invalidField('Upload-Metadata', ERRORS.INVALID_METADATA.body.trim());
  }
}

/** No deferred length, no other length than was announced, no bytes along with the creation. */
function requireAnnouncedLength(req: Request, sizeBytes: number): void {
  if (req.headers['upload-defer-length'] !== undefined) {
    throw invalidField('Upload-Defer-Length', 'is not possible: the size has been announced');
  }
  if (req.headers['upload-length'] !== String(sizeBytes)) {
    throw invalidField('Upload-Length', `must be ${sizeBytes}, as announced`);
  }
  if (req.headers['content-type'] === bytesType) {
    throw new ProblemError('unsupported-type', 'Bytes come in a PATCH request after the creation.');
  }
}
