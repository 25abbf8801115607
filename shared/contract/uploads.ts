import { z } from 'zod';
import { idSchema, instantSchema, sha256Schema } from './ids.ts';
import { cameraOriginSchema } from './camera.ts';
import { declaredLayoutSchema } from './layouts.ts';
import { licenceSchema } from './licence.ts';
import { recordingSchema, sensitivitySchema } from './recordings.ts';

export const uploadStateSchema = z.enum(['open', 'complete', 'expired', 'cancelled']);
export type UploadState = z.infer<typeof uploadStateSchema>;

/** What must be told with a recording, however its bytes travel. */
export const declarationSchema = z.object({
  setupId: idSchema,
  sensitivity: z.array(sensitivitySchema).max(10).default([]),
  licence: licenceSchema,
  /** Place of the first sample on the run's clock. */
  runOffsetNs: z.number().int().nullable().default(null),
  /** The factor by which the file plays slower than life; 1 where it does not. */
  timeExpansion: z.number().min(1).max(1000).default(1),
  note: z.string().trim().max(2000).default(''),
  /** How the samples lie, for a file that does not say it itself. */
  layout: declaredLayoutSchema.nullable().default(null),
  /** Of a WAV file that was taken out of a film. */
  camera: cameraOriginSchema.nullable().default(null),
});
export type Declaration = z.infer<typeof declarationSchema>;

export const maximumUploadBytes = 64 * 2 ** 30;

export const createUploadSchema = declarationSchema.extend({
  runId: idSchema,
  fileName: z.string().trim().min(1, 'is needed').max(255),
  sizeBytes: z.number().int().min(1, 'is an empty file').max(maximumUploadBytes, 'is larger than 64 GiB'),
});
export type CreateUpload = z.infer<typeof createUploadSchema>;

export const uploadSchema = z.object({
  id: idSchema,
  runId: idSchema,
  runTitle: z.string(),
  setupId: idSchema,
  fileName: z.string(),
  sizeBytes: z.number().int(),
  state: uploadStateSchema,
  /** Bytes the server holds so far. */
  receivedBytes: z.number().int(),
  recordingId: idSchema.nullable(),
  createdAt: instantSchema,
  expiresAt: instantSchema,
});
export type Upload = z.infer<typeof uploadSchema>;
export const uploadsSchema = z.object({ items: z.array(uploadSchema) });
export const createdUploadSchema = z.object({ id: idSchema });

export const completeUploadSchema = z.object({ sha256: sha256Schema.optional() });
export const broughtInSchema = z.object({ recording: recordingSchema });
