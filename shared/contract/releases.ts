import { z } from 'zod';
import { idSchema, instantSchema, sha256Schema } from './ids.ts';
import { licenceSchema } from './licence.ts';
import { pageSchema, pageQuerySchema } from './page.ts';
import { creditSchema } from './runs.ts';

export const releaseStateSchema = z.enum(['building', 'built', 'failed', 'published', 'withdrawn']);
export type ReleaseState = z.infer<typeof releaseStateSchema>;

export const createReleaseSchema = z.object({
  version: z
    .string()
    .regex(/^(0|[1-9]\d{0,5})\.(0|[1-9]\d{0,5})\.(0|[1-9]\d{0,5})$/, 'is a version of the form 1.0.0'),
  licence: licenceSchema,
  notes: z.string().trim().min(10, 'needs a sentence (at least 10 characters)').max(10_000),
});
export type CreateRelease = z.infer<typeof createReleaseSchema>;

export const releaseListItemSchema = z.object({
  id: idSchema,
  collectionId: idSchema,
  collectionTitle: z.string(),
  slug: z.string(),
  version: z.string(),
  state: releaseStateSchema,
  licence: licenceSchema,
  releaseDate: z.iso.date(),
  recordingCount: z.number().int(),
  eventCount: z.number().int(),
  sizeBytes: z.number().int().nullable(),
  publishedAt: instantSchema.nullable(),
});
export type ReleaseListItem = z.infer<typeof releaseListItemSchema>;
export const releasesPageSchema = pageSchema(releaseListItemSchema);
export const listReleasesQuerySchema = pageQuerySchema.extend({ collectionId: idSchema.optional() });

export const releaseFileSchema = z.object({
  path: z.string(),
  sizeBytes: z.number().int(),
  sha256: sha256Schema,
});
export type ReleaseFile = z.infer<typeof releaseFileSchema>;

export const releaseSchema = releaseListItemSchema.extend({
  description: z.string(),
  notes: z.string(),
  publisher: z.string(),
  creators: z.array(creditSchema),
  citation: z.string(),
  /** How to check the archive in a shell, and how to read it in Python; `null` before it is built. */
  usage: z.object({ verify: z.string(), load: z.string() }).nullable(),
  doi: z.string().nullable(),
  fileName: z.string().nullable(),
  sha256: sha256Schema.nullable(),
  files: z.array(releaseFileSchema),
  /** Events per class, and recordings per material, for the summary of the page. */
  classes: z.array(z.object({ key: z.string(), title: z.string(), count: z.number().int() })),
  materials: z.array(z.object({ material: z.string(), recordings: z.number().int() })),
  labs: z.array(z.string()),
  failure: z.string().nullable(),
  /** 0 to 1 while building. */
  progress: z.number().min(0).max(1),
  withdrawnReason: z.string().nullable(),
  otherVersions: z.array(
    z.object({ id: idSchema, version: z.string(), state: releaseStateSchema, releaseDate: z.iso.date() }),
  ),
});
export type Release = z.infer<typeof releaseSchema>;

export const withdrawSchema = z.object({
  reason: z.string().trim().min(10, 'needs a sentence (at least 10 characters)').max(2000),
});
