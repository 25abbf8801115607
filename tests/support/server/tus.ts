import { createUploadSchema } from '../../../shared/contract/uploads.ts';
import { seedRun, seedSetup } from './seed-recordings.ts';
import type { ActorName } from './seed-actors.ts';
import type { TestApp } from './test-app.ts';

export const bytesPath = '/api/uploads/bytes';
export const tusVersion = { 'Tus-Resumable': '1.0.0' };
export const bytesType = { 'Content-Type': 'application/offset+octet-stream' };

/** Announces a file of the contributor; no byte of it has been sent. */
export async function announceUpload(app: TestApp, sizeBytes: number, facts: object = {}): Promise<string> {
  const ids = { runId: seedRun(app).id, setupId: seedSetup(app).id };
  const input = { ...ids, fileName: 'drop.wav', sizeBytes, licence: 'CC-BY-4.0', ...facts };
  const { id } = await app.deps.services.uploads.create(
    app.actor('contributor'),
    createUploadSchema.parse(input),
  );
  return id;
}

export function createStream(app: TestApp, id: string, sizeBytes: number, name: ActorName = 'contributor') {
  const metadata = `uploadId ${Buffer.from(id).toString('base64')},fileName ${Buffer.from('../../x').toString('base64')}`;
  const headers = { ...tusVersion, 'Upload-Length': String(sizeBytes), 'Upload-Metadata': metadata };
  return app.as(name).post(bytesPath).set(headers);
}

export function sendBytes(
  app: TestApp,
  id: string,
  offset: number,
  bytes: Uint8Array,
  name: ActorName = 'contributor',
) {
  const headers = { ...tusVersion, ...bytesType, 'Upload-Offset': String(offset) };
  return app.as(name).patch(`${bytesPath}/${id}`).set(headers).send(Buffer.from(bytes));
}

export function askOffset(app: TestApp, id: string, name: ActorName = 'contributor') {
  return app.as(name).head(`${bytesPath}/${id}`).set(tusVersion);
}

export function complete(app: TestApp, id: string, body: object = {}, name: ActorName = 'contributor') {
  return app.as(name).post(`/api/uploads/${id}/complete`).send(body);
}

/** Announced and sent whole. */
export async function sendWhole(app: TestApp, bytes: Uint8Array, facts: object = {}): Promise<string> {
  const id = await announceUpload(app, bytes.length, facts);
  await createStream(app, id, bytes.length);
  await sendBytes(app, id, 0, bytes);
  return id;
}
