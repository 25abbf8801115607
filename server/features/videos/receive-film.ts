import { createWriteStream } from 'node:fs';
import type { IncomingMessage } from 'node:http';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { mostVideoBytes } from '../../../shared/contract/videos.ts';
import { ProblemError } from '../../http/problem.ts';

/** How many bytes will come; a film is not taken without knowing. */
export function announcedFilmBytes(request: Pick<IncomingMessage, 'headers'>): number {
  const announced = Number(request.headers['content-length'] ?? Number.NaN);
  if (!Number.isSafeInteger(announced) || announced <= 0)
    throw new ProblemError('malformed-request', 'Say in Content-Length how large the film is.');
  if (announced > mostVideoBytes) throw tooLarge();
  return announced;
}

/** Writes the body of the request to `path`. Whoever calls removes that file, also when this rejects. */
export async function receiveFilm(request: IncomingMessage, path: string): Promise<void> {
  try {
    await pipeline(request, limited(), createWriteStream(path, { flags: 'wx', mode: 0o600 }));
  } catch (error) {
    if (error instanceof ProblemError || !(error instanceof Error)) throw error;
    if ('code' in error && error.code === 'ERR_STREAM_PREMATURE_CLOSE')
      throw new ProblemError('malformed-request', 'The film ends before it is complete.', { cause: error });
    throw error;
  }
}

function limited(): Transform {
  let bytes = 0;
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      bytes += chunk.length;
      if (bytes > mostVideoBytes) done(tooLarge());
      else done(null, chunk);
    },
  });
}

function tooLarge(): ProblemError {
  return new ProblemError('too-large', 'A film may have 4 GB at most. Bring in the part that matters.');
}
