import { z } from 'zod';
import { idSchema, instantSchema, revisionSchema } from './ids.ts';
import { licenceSchema } from './licence.ts';
import { pageSchema, pageQuerySchema } from './page.ts';
import { recordingListItemSchema } from './recordings.ts';
import { splitWordIn } from '../domain/split-word.ts';
import { creditSchema } from './runs.ts';

export const saveCollectionSchema = z.object({
  title: z.string().trim().min(3, 'needs at least 3 characters').max(160),
  slug: z
    .string()
    .trim()
    .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'may hold lower-case letters, digits and single hyphens')
    .min(3)
    .max(60)
    .refine((slug) => splitWordIn(slug) === null, {
      message: 'may not hold a word that loaders read as the name of a split, such as "test"',
    }),
  description: z.string().trim().min(20, 'needs a sentence or two (at least 20 characters)').max(4000),
  publisher: z.string().trim().min(2, 'is needed').max(160),
  contactEmail: z.email('is not an e-mail address'),
  creators: z.array(creditSchema).min(1, 'needs at least one creator').max(50),
});
export type SaveCollection = z.infer<typeof saveCollectionSchema>;

export const collectionSchema = saveCollectionSchema.extend({
  id: idSchema,
  itemCount: z.number().int(),
  latestVersion: z.string().nullable(),
  createdAt: instantSchema,
  revision: revisionSchema,
});
export type Collection = z.infer<typeof collectionSchema>;
export const collectionsPageSchema = pageSchema(collectionSchema);
export const listCollectionsQuerySchema = pageQuerySchema.extend({
  q: z.string().trim().max(100).optional(),
});

export type ListCollectionsQuery = z.infer<typeof listCollectionsQuerySchema>;

export const collectionItemSchema = recordingListItemSchema.extend({
  licence: licenceSchema,
  finishedPasses: z.number().int(),
  /** `null` where the asking person works blind on the recording. */
  eventCount: z.number().int().nullable(),
  addedAt: instantSchema,
});
export type CollectionItem = z.infer<typeof collectionItemSchema>;
export const collectionItemsPageSchema = pageSchema(collectionItemSchema);

/** Adds by id or by filter (what the curator may see at this moment); what is in already stays. */
export const addItemsSchema = z
  .object({
    recordingIds: z.array(idSchema).max(5000).optional(),
    filter: z
      .object({
        q: z.string().trim().max(100).optional(),
        labId: idSchema.optional(),
        material: z.string().trim().max(120).optional(),
        ultrasonicVerdict: z.enum(['not-observable', 'found', 'not-found']).optional(),
      })
      .optional(),
  })
  .refine((body) => (body.recordingIds === undefined) !== (body.filter === undefined), {
    message: 'must have either recordingIds or filter',
  });
export type AddItems = z.infer<typeof addItemsSchema>;
export const addedItemsSchema = z.object({ added: z.number().int(), alreadyIn: z.number().int() });
export const collectionItemParamsSchema = z.object({ id: idSchema, recordingId: idSchema });

/** One thing that still forbids a release, or that is only told. */
export const gateSchema = z.object({
  key: z.enum(['empty', 'sharing', 'processing', 'licence', 'credit', 'passes']),
  state: z.enum(['open', 'closed', 'told']),
  sentence: z.string(),
  /** The page that closes it. */
  href: z.string().nullable(),
  recordings: z.array(z.object({ id: idSchema, fileName: z.string(), why: z.string() })).max(100),
});
export type Gate = z.infer<typeof gateSchema>;
export const gatesSchema = z.object({
  gates: z.array(gateSchema),
  releasable: z.boolean(),
  /** Licences the whole may carry, loosest first; empty when the members' licences do not mix. */
  possibleLicences: z.array(licenceSchema),
  previousVersion: z.string().nullable(),
  /** The smallest version the next release may have, with the reason. */
  minimumVersion: z.string(),
  minimumVersionReason: z.string(),
});
export type Gates = z.infer<typeof gatesSchema>;
