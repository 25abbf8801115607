import { createWriteStream } from 'node:fs';
import type { IncomingMessage } from 'node:http';
import type { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Busboy, type BusboyFileStream, type BusboyInstance } from '@fastify/busboy';
import { maximumUploadBytes } from '../../../shared/contract/uploads.ts';
import { ProblemError, invalidField } from '../../http/problem.ts';

export interface ReceivedForm {
  fields: Map<string, string[]>;
  file: { fileName: string; sizeBytes: number };
}

const limits = {
  files: 1,
  fields: 40,
  fieldSize: 8192,
  fieldNameSize: 100,
  headerPairs: 20,
};

/**
 * Reads a multipart form (RFC 7578) with one file in the part `file`, which goes straight to `path`. Whoever calls
 * removes that file, also when this rejects.
 */
export async function receiveForm(
  request: IncomingMessage,
  path: string,
  maximumBytes = maximumUploadBytes,
): Promise<ReceivedForm> {
  const busboy = openBusboy(request, maximumBytes);
  const fields = new Map<string, string[]>();
  const file = new FileBranch({ path, maximumBytes }, busboy);
  busboy.on('field', (name, value, nameCut, valueCut) => {
    if (nameCut || valueCut) busboy.destroy(invalidField(name, 'is too long'));
    else fields.set(name, [...(fields.get(name) ?? []), value]);
  });
  busboy.on('fieldsLimit', () => busboy.destroy(invalidField('', `has more than ${limits.fields} fields`)));
  busboy.on('filesLimit', () => busboy.destroy(invalidField('file', 'is one file, not several')));
  busboy.on('file', (name, stream, fileName) => file.take(name, stream, fileName));
  try {
    await feed(request, busboy);
    return { fields, file: await file.finish() };
  } catch (error) {
    await file.abandon();
    throw toProblem(error);
  }
}

function openBusboy(request: IncomingMessage, fileSize: number): BusboyInstance {
  const contentType = request.headers['content-type'] ?? '';
  if (!/^multipart\/form-data\s*;.*boundary=/i.test(contentType)) {
    throw new ProblemError(
      'unsupported-type',
      'The body must be a form, with the content type multipart/form-data.',
    );
  }
  const headers = { ...request.headers, 'content-type': contentType };
  return new Busboy({ headers, limits: { ...limits, fileSize } });
}

/** Unlike a pipeline, this leaves the request open when the form is refused, so that the refusal can be answered. */
function feed(request: IncomingMessage, busboy: BusboyInstance): Promise<void> {
  return new Promise((resolve, reject) => {
    const stop = (error: Error) => {
      request.unpipe(busboy);
      request.resume();
      reject(error);
    };
    busboy.once('finish', resolve);
    busboy.on('error', (error: unknown) => stop(error instanceof Error ? error : new Error(String(error))));
    const breakOff = () =>
      stop(new ProblemError('malformed-request', 'The form ends before it is complete.'));
    request.on('error', breakOff);
    request.once('close', () => {
      if (!request.complete) breakOff();
    });
    request.pipe(busboy);
  });
}

/** The one part that is written to the disk. */
class FileBranch {
  readonly #path: string;
  readonly #maximumBytes: number;
  readonly #busboy: BusboyInstance;
  #stream: BusboyFileStream | null = null;
  #fileName = '';
  #sizeBytes = 0;
  #written: Promise<void> | null = null;
  readonly #stop = new AbortController();

  constructor({ path, maximumBytes }: { path: string; maximumBytes: number }, busboy: BusboyInstance) {
    this.#path = path;
    this.#maximumBytes = maximumBytes;
    this.#busboy = busboy;
  }

  take(name: string, stream: BusboyFileStream, fileName: string | undefined): void {
    // A part that breaks off tells it here as well; the form's own error is the one that is answered.
    stream.on('error', () => undefined);
    if (name !== 'file') {
      stream.resume();
      this.#busboy.destroy(
        invalidField(name, 'is not a part of this form; the file belongs in the part file'),
      );
      return;
    }
    this.#stream = stream;
    this.#fileName = fileName ?? '';
    this.#written = this.#write(stream);
    this.#written.catch((error: unknown) => this.#busboy.destroy(error instanceof Error ? error : undefined));
  }

  async #write(stream: Readable): Promise<void> {
    const target = createWriteStream(this.#path, { flags: 'wx', mode: 0o600 });
    await pipeline(stream, target, { signal: this.#stop.signal });
    this.#sizeBytes = target.bytesWritten;
  }

  async finish(): Promise<ReceivedForm['file']> {
    if (this.#written === null) throw invalidField('file', 'is needed');
    await this.#written;
    if (this.#stream?.truncated === true)
      throw new ProblemError('too-large', `The file is larger than ${formatLimit(this.#maximumBytes)}.`);
    return { fileName: this.#fileName, sizeBytes: this.#sizeBytes };
  }

  async abandon(): Promise<void> {
    this.#stop.abort();
    await this.#written?.catch(() => undefined);
  }
}

function formatLimit(bytes: number): string {
  return bytes >= 2 ** 30 ? `${bytes / 2 ** 30} GiB` : `${bytes / 1e6} MB`;
}

function toProblem(error: unknown): unknown {
  if (error instanceof ProblemError || (error instanceof Error && 'code' in error)) return error;
  return new ProblemError('malformed-request', 'The form could not be read.', { cause: error });
}
