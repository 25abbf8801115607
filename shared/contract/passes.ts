import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';
import { pageSchema, pageQuerySchema } from './page.ts';

export const passStateSchema = z.enum(['assigned', 'finished', 'cancelled']);
export type PassState = z.infer<typeof passStateSchema>;

export const createPassSchema = z.object({
  recordingId: idSchema,
  labelerId: idSchema,
  /** A blind pass shows no candidates, counts, rates or other people's marks. */
  blind: z.boolean().default(true),
  dueAt: instantSchema.nullable().default(null),
  instructions: z.string().trim().max(2000).default(''),
});
export type CreatePass = z.infer<typeof createPassSchema>;

export const passSchema = z.object({
  id: idSchema,
  recordingId: idSchema,
  recordingName: z.string(),
  runTitle: z.string(),
  durationS: z.number(),
  labelerId: idSchema,
  labelerName: z.string(),
  blind: z.boolean(),
  state: passStateSchema,
  dueAt: instantSchema.nullable(),
  instructions: z.string(),
  schemeVersion: z.number().int(),
  /** Marks set so far in this pass. */
  eventCount: z.number().int(),
  createdAt: instantSchema,
  finishedAt: instantSchema.nullable(),
});
export type Pass = z.infer<typeof passSchema>;

export const listPassesQuerySchema = pageQuerySchema.extend({
  recordingId: idSchema.optional(),
  mine: z.stringbool().optional(),
  state: passStateSchema.optional(),
});
export type ListPassesQuery = z.infer<typeof listPassesQuerySchema>;
export const passesPageSchema = pageSchema(passSchema);
export const finishPassSchema = z.object({ remark: z.string().trim().max(2000).default('') });
