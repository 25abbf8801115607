import { writeFile } from 'node:fs/promises';
import { createUploadSchema } from '../../../shared/contract/uploads.ts';
import { seedRun, seedSetup, smallWav } from '../server/seed-recordings.ts';
import type { TestApp } from '../server/test-app.ts';
import { everybody, signedIn, type MatrixRow } from './matrix-row.ts';

const wav = smallWav();
const tus = { 'Tus-Resumable': '1.0.0' };

function announcement(app: TestApp) {
  const ids = { runId: seedRun(app).id, setupId: seedSetup(app).id };
  return createUploadSchema.parse({
    ...ids,
    fileName: 'drop.wav',
    sizeBytes: wav.length,
    licence: 'CC0-1.0',
  });
}

/** An upload of the contributor with its first `received` bytes on the disk. */
async function seedUpload(app: TestApp, received: number): Promise<string> {
  const { uploads, uploadFolder } = app.deps.services;
  const { id } = await uploads.create(app.actor('contributor'), announcement(app));
  uploads.keepAlive(id);
  await writeFile(uploadFolder.pathOf(id), wav.subarray(0, received));
  return id;
}

const onlyTheOwner = (status: number) => signedIn(404, { contributor: status });

export const uploadsRows: MatrixRow[] = [
  {
    route: 'POST /api/uploads',
    prepare: (app) => ({ path: '/api/uploads', body: announcement(app) }),
    expected: signedIn(403, { contributor: 201, otherContributor: 422 }),
  },
  {
    route: 'GET /api/uploads',
    prepare: () => ({ path: '/api/uploads' }),
    expected: signedIn(200),
  },
  {
    route: 'DELETE /api/uploads/:id',
    prepare: async (app) => ({ path: `/api/uploads/${await seedUpload(app, 10)}` }),
    expected: onlyTheOwner(204),
  },
  {
    route: 'POST /api/uploads/:id/complete',
    prepare: async (app) => ({
      path: `/api/uploads/${await seedUpload(app, wav.length)}/complete`,
      body: {},
    }),
    expected: onlyTheOwner(200),
  },
  {
    route: 'POST /api/uploads/bytes',
    prepare: async (app) => {
      const id = await seedUpload(app, 0);
      const metadata = `uploadId ${Buffer.from(id).toString('base64')}`;
      const headers = { ...tus, 'Upload-Length': String(wav.length), 'Upload-Metadata': metadata };
      return { path: '/api/uploads/bytes', headers };
    },
    expected: onlyTheOwner(201),
  },
  {
    route: 'HEAD /api/uploads/bytes/:id',
    prepare: async (app) => ({ path: `/api/uploads/bytes/${await seedUpload(app, 10)}`, headers: tus }),
    expected: onlyTheOwner(200),
  },
  {
    route: 'PATCH /api/uploads/bytes/:id',
    prepare: async (app) => ({
      path: `/api/uploads/bytes/${await seedUpload(app, 10)}`,
      headers: { ...tus, 'Upload-Offset': '10', 'Content-Type': 'application/offset+octet-stream' },
    }),
    expected: onlyTheOwner(204),
  },
  {
    route: 'OPTIONS /api/uploads/bytes',
    prepare: () => ({ path: '/api/uploads/bytes' }),
    expected: everybody(204),
  },
  {
    route: 'POST /api/runs/:id/recordings',
    state: 'with a body that is no form',
    prepare: (app) => ({ path: `/api/runs/${seedRun(app).id}/recordings`, body: {} }),
    expected: signedIn(404, { contributor: 415, reviewer: 403 }),
  },
];
