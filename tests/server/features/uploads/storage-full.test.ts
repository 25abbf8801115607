import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest';
import { TusStore } from '../../../../server/features/uploads/tus-store.ts';
import { createUploadFolder, keptFreeBytes } from '../../../../server/features/uploads/upload-folder.ts';
import { seedRun, seedSetup, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { announceUpload, askOffset, complete, createStream, sendBytes } from '../../../support/server/tus.ts';

const wav = smallWav();

describe('the room that uploads may take', () => {
  test('ends a gibibyte before the disk does', async () => {
    const folder = mkdtempSync(path.join(tmpdir(), 'recalesce-room-'));
    const room = createUploadFolder({ folder, freeBytes: () => Promise.resolve(keptFreeBytes + 1000) });
    await room.requireRoom(1000);
    await expect(room.requireRoom(1001)).rejects.toMatchObject({ code: 'storage-full', status: 507 });
    rmSync(folder, { recursive: true });
  });

  test('is answered with 507 in words when the disk fills while bytes arrive', async () => {
    // A device of Linux on which every write fails with ENOSPC.
    const store = new TusStore({ pathOf: () => '/dev/full', findStream: () => undefined });
    const writing = store.write(Readable.from([Buffer.alloc(10)]), 'any', 0);
    await expect(writing).rejects.toMatchObject({
      status_code: 507,
      body: expect.stringContaining('no room left'),
    });
  });
});

describe('while there is no room', () => {
  let app: TestApp;
  beforeAll(() => {
    app = createTestApp();
  });
  afterAll(() => app.close());

  test('nothing new begins, and what has begun goes on once there is room again', async () => {
    const id = await announceUpload(app, wav.length);
    await createStream(app, id, wav.length);
    const facts = {
      runId: seedRun(app).id,
      setupId: seedSetup(app).id,
      fileName: 'a.wav',
      licence: 'CC0-1.0',
    };
    const full = createUploadFolder({
      folder: app.deps.config.paths.uploads,
      freeBytes: () => Promise.resolve(0),
    });
    const room = vi.spyOn(app.deps.services.uploadFolder, 'requireRoom').mockImplementation(full.requireRoom);
    const refused = [
      await app
        .as('contributor')
        .post('/api/uploads')
        .send({ ...facts, sizeBytes: 10 }),
      await sendBytes(app, id, 0, wav),
      await app
        .as('contributor')
        .post(`/api/runs/${facts.runId}/recordings`)
        .attach('file', Buffer.from(wav), 'a.wav'),
    ];
    expect(refused.map(({ status, body }) => [status, body.code])).toEqual(
      Array(3).fill([507, 'storage-full']),
    );
    expect((await askOffset(app, id)).headers['upload-offset']).toBe('0');
    room.mockRestore();
    await sendBytes(app, id, 0, wav);
    expect((await complete(app, id)).status).toBe(200);
  });
});
