import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';
import { pageSchema, pageQuerySchema } from './page.ts';

export const passStateSchema = z.enum(['assigned', 'finished', 'cancelled']);
export type PassState = z.infer<typeof passStateSchema>;

/** Growth phases are marked from camera and temperature alone: the server keeps the sound of the recording back. */
export const passTaskSchema = z.enum(['events', 'phases']);
export type PassTask = z.infer<typeof passTaskSchema>;

/** The whole recording, windows drawn at random in strata, or candidates one after another. */
export const passKindSchema = z.enum(['whole', 'windows', 'rounds']);
export type PassKind = z.infer<typeof passKindSchema>;

export const roundOrderSchema = z.enum(['time', 'strength', 'uncertainty', 'likeness']);
export type RoundOrder = z.infer<typeof roundOrderSchema>;

/** Half-open. `stratum` counts the equal parts of the recording from which one window each was drawn. */
export const passWindowSchema = z.object({
  startSample: z.number().int().min(0),
  endSample: z.number().int().min(1),
  stratum: z.number().int().min(0),
});
export type PassWindow = z.infer<typeof passWindowSchema>;

export const coverageWaySchema = z.enum(['seen', 'heard']);
export type CoverageWay = z.infer<typeof coverageWaySchema>;

/** Shares of the part that the pass is of, from 0 to 1. */
export const passCoverageSchema = z.object({ seenShare: z.number(), heardShare: z.number() });
export type PassCoverage = z.infer<typeof passCoverageSchema>;

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
