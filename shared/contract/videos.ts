import { z } from 'zod';
import { idSchema, instantSchema, revisionSchema, sha256Schema } from './ids.ts';

/** One instant told on both clocks: a clap, a flash. */
export const syncMarkSchema = z.object({
  videoS: z.number().min(0).max(1e7),
  runTimeNs: z.number().int().min(-1e15).max(1e15),
});
export type SyncMark = z.infer<typeof syncMarkSchema>;

export const videoContainerSchema = z.enum(['mp4', 'webm']);
export type VideoContainer = z.infer<typeof videoContainerSchema>;

export const mostVideoBytes = 4_000_000_000;
export const mostVideosOfRun = 20;

/** What goes with the bytes of a film, which are the body of the request. */
export const addVideoQuerySchema = z.object({
  fileName: z.string().trim().min(1, 'is needed').max(255),
  /** Whoever can be seen has agreed, or nobody can be seen. */
  peopleAgreed: z.stringbool().refine((agreed) => agreed, 'has to be declared before a film is brought in'),
});
export type AddVideo = z.infer<typeof addVideoQuerySchema>;

export const patchVideoSchema = z
  .object({
    runOffsetNs: z.number().int().min(-1e15).max(1e15).nullable(),
    clockPpm: z.number().min(-2000).max(2000),
    syncMarks: z.array(syncMarkSchema).max(20),
  })
  .partial();
export type PatchVideo = z.infer<typeof patchVideoSchema>;

export const videoSchema = z.object({
  id: idSchema,
  runId: idSchema,
  fileName: z.string(),
  container: videoContainerSchema,
  /** Of the film as it is kept: without a sound track. */
  sha256: sha256Schema,
  sizeBytes: z.number().int(),
  durationS: z.number().nullable(),
  widthPx: z.number().int().nullable(),
  heightPx: z.number().int().nullable(),
  framesPerS: z.number().nullable(),
  /** Run time of its first picture; `null` until it has been set. */
  runOffsetNs: z.number().int().nullable(),
  /** How much faster its clock runs than that of the run. */
  clockPpm: z.number(),
  syncMarks: z.array(syncMarkSchema),
  editable: z.boolean(),
  createdAt: instantSchema,
  revision: revisionSchema,
});
export type Video = z.infer<typeof videoSchema>;

export const addedVideoSchema = videoSchema.extend({
  /** True where the film came with sound, which was left out. */
  isSoundLeftOut: z.boolean(),
});
export type AddedVideo = z.infer<typeof addedVideoSchema>;

export const videosSchema = z.object({
  items: z.array(videoSchema),
  /** True while an open blind pass on a recording of the run forbids them; then there are no items. */
  isWithheld: z.boolean(),
  mayAdd: z.boolean(),
});
export type Videos = z.infer<typeof videosSchema>;

export const filmQuerySchema = z.object({ download: z.stringbool().default(false) });
