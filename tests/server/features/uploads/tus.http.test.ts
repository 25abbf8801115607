import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Upload } from 'tus-js-client';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import {
  announceUpload,
  askOffset,
  bytesPath,
  bytesType,
  complete,
  createStream,
  sendBytes,
  sendWhole,
  tusVersion,
} from '../../../support/server/tus.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const wav = smallWav();

describe('the byte protocol (tus 1.0.0)', () => {
  test('a stream is created under the id of the upload, takes bytes in pieces and tells how many it has', async () => {
    const id = await announceUpload(app, wav.length);
    const created = await createStream(app, id, wav.length);
    expect([created.status, created.headers['location']]).toEqual([201, `${bytesPath}/${id}`]);
    const first = await sendBytes(app, id, 0, wav.subarray(0, 1000));
    expect([first.status, first.headers['upload-offset']]).toEqual([204, '1000']);
    const asked = await askOffset(app, id);
    expect(asked.headers).toMatchObject({
      'upload-offset': '1000',
      'upload-length': String(wav.length),
      'cache-control': 'no-store',
    });
    await sendBytes(app, id, 1000, wav.subarray(1000));
    expect((await askOffset(app, id)).headers['upload-offset']).toBe(String(wav.length));
    expect(readFileSync(app.deps.services.uploadFolder.pathOf(id))).toEqual(Buffer.from(wav));
  });

  test('an offset that does not fit is answered with 409, and nothing is written', async () => {
    const id = await announceUpload(app, wav.length);
    await createStream(app, id, wav.length);
    await sendBytes(app, id, 0, wav.subarray(0, 100));
    expect((await sendBytes(app, id, 50, wav.subarray(50, 200))).status).toBe(409);
    expect((await askOffset(app, id)).headers['upload-offset']).toBe('100');
  });

  test('creating again keeps what has arrived: there is one stream for each upload', async () => {
    const id = await announceUpload(app, wav.length);
    await createStream(app, id, wav.length);
    await sendBytes(app, id, 0, wav.subarray(0, 100));
    expect((await createStream(app, id, wav.length)).status).toBe(201);
    expect((await askOffset(app, id)).headers['upload-offset']).toBe('100');
  });

  test('more bytes than announced are refused', async () => {
    const id = await announceUpload(app, 100);
    await createStream(app, id, 100);
    expect((await sendBytes(app, id, 0, wav.subarray(0, 101))).status).toBe(413);
    expect((await askOffset(app, id)).headers['upload-offset']).toBe('0');
  });

  test('a length other than announced, a deferred one, and bytes along with the creation are refused', async () => {
    const id = await announceUpload(app, wav.length);
    expect((await createStream(app, id, wav.length + 1)).body.fields[0].path).toBe('Upload-Length');
    const deferred = createStream(app, id, wav.length).unset('Upload-Length').set('Upload-Defer-Length', '1');
    expect((await deferred).body.fields[0].path).toBe('Upload-Defer-Length');
    const withBytes = createStream(app, id, wav.length)
      .set(bytesType)
      .send(Buffer.from(wav.subarray(0, 10)));
    expect((await withBytes).status).toBe(415);
    expect((await askOffset(app, id)).status).toBe(404);
  });

  test('a stream without an announced upload is refused, whatever the metadata say', async () => {
    const unknown = '01890000-0000-7000-8000-000000000000';
    expect((await createStream(app, unknown, 10)).status).toBe(404);
    expect((await createStream(app, '../../etc/passwd', 10)).status).toBe(422);
    const broken = app
      .as('contributor')
      .post(bytesPath)
      .set({ ...tusVersion, 'Upload-Length': '10', 'Upload-Metadata': 'uploadId %%%' });
    expect((await broken).body.fields[0].path).toBe('Upload-Metadata');
  });

  test('another version is answered with 412 and the version that is spoken', async () => {
    const id = await announceUpload(app, wav.length);
    for (const version of ['0.2.2', undefined]) {
      const request = askOffset(app, id).unset('Tus-Resumable');
      const answer = await (version === undefined ? request : request.set('Tus-Resumable', version));
      expect([answer.status, answer.headers['tus-version']]).toEqual([412, '1.0.0']);
    }
  });

  test('bytes of another type are answered with 415', async () => {
    const id = await announceUpload(app, wav.length);
    await createStream(app, id, wav.length);
    expect((await sendBytes(app, id, 0, wav).set('Content-Type', 'application/octet-stream')).status).toBe(
      415,
    );
  });

  test('OPTIONS tells version, extensions and the largest size', async () => {
    const answer = await app.as('anonymous').options(bytesPath);
    expect(answer.status).toBe(204);
    expect(answer.headers).toMatchObject({
      'tus-version': '1.0.0',
      'tus-extension': 'creation',
      'tus-max-size': String(64 * 2 ** 30),
    });
  });

  test('bytes can be read or deleted by nobody, not even by the owner', async () => {
    const id = await sendWhole(app, wav);
    const owner = app.as('contributor');
    expect((await owner.get(`${bytesPath}/${id}`).set(tusVersion)).status).toBe(405);
    expect((await owner.delete(`${bytesPath}/${id}`).set(tusVersion)).status).toBe(405);
    expect((await askOffset(app, id)).headers['upload-offset']).toBe(String(wav.length));
  });

  test('no answer opens itself to other origins', async () => {
    const id = await announceUpload(app, wav.length);
    const answers = [
      await createStream(app, id, wav.length),
      await askOffset(app, id),
      await app.as('anonymous').options(bytesPath),
    ];
    for (const answer of answers) expect(answer.headers['access-control-allow-origin']).toBeUndefined();
  });

  test('every request asks whose upload it is, and says no more to others than that there is none', async () => {
    const id = await announceUpload(app, wav.length);
    await createStream(app, id, wav.length);
    for (const name of ['otherContributor', 'reviewer', 'curator', 'administrator'] as const) {
      expect((await createStream(app, id, wav.length, name)).status).toBe(404);
      expect((await askOffset(app, id, name)).status).toBe(404);
      expect((await sendBytes(app, id, 0, wav.subarray(0, 10), name)).status).toBe(404);
      expect((await complete(app, id, {}, name)).status).toBe(404);
    }
    expect((await askOffset(app, id)).headers['upload-offset']).toBe('0');
  });
});

describe('with the client that browsers use', () => {
  let server: Server;
  let origin: string;
  beforeAll(async () => {
    server = createServer(app.http);
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    origin = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  });
  afterAll(() => new Promise((resolve) => server.close(resolve)));

  function clientUpload(id: string, stopAfterBytes?: number, uploadUrl?: string): Promise<string> {
    const cookie = `${app.deps.cookie.name}=${app.sessionTokens.contributor}`;
    return new Promise((resolve, reject) => {
      const upload: Upload = new Upload(Buffer.from(wav), {
        endpoint: `${origin}${bytesPath}`,
        ...(uploadUrl === undefined ? {} : { uploadUrl }),
        chunkSize: 16_384,
        metadata: { uploadId: id },
        headers: { Cookie: cookie, Origin: app.deps.config.publicUrl },
        retryDelays: null,
        onError: reject,
        onSuccess: () => resolve('done'),
        onChunkComplete: (_size, sentBytes) => {
          if (stopAfterBytes === undefined || sentBytes < stopAfterBytes) return;
          void upload.abort().then(() => resolve('stopped'));
        },
      });
      upload.start();
    });
  }

  test('an upload that was broken off is resumed where it stopped, and the recording has the very bytes', async () => {
    const id = await announceUpload(app, wav.length);
    expect(await clientUpload(id, 30_000)).toBe('stopped');
    const offset = Number((await askOffset(app, id)).headers['upload-offset']);
    expect(offset).toBeGreaterThanOrEqual(30_000);
    expect(offset).toBeLessThan(wav.length);
    expect(await clientUpload(id, undefined, `${origin}${bytesPath}/${id}`)).toBe('done');
    const sha256 = createHash('sha256').update(wav).digest('hex');
    const { body } = await complete(app, id, { sha256 });
    expect(body.recording).toMatchObject({ sha256, sizeBytes: wav.length });
    expect(readFileSync(app.deps.store.pathOf(sha256))).toEqual(Buffer.from(wav));
  });
});
