import { z } from 'zod';
import { idSchema } from './ids.ts';

/** What the rate of events is counted from: what the detector proposes, or the marks that the person may see. */
export const countedSchema = z.enum(['candidates', 'marks']);
export type Counted = z.infer<typeof countedSchema>;

export const timelineQuerySchema = z.object({ counted: countedSchema.default('candidates') });

/** Samples without a gap on the clock of the run, in nanoseconds; both spans are half-open. */
export const runPieceSchema = z.object({
  startSample: z.number().int().min(0),
  endSample: z.number().int().min(0),
  startNs: z.number(),
  endNs: z.number(),
});

export const timelineRecordingSchema = z.object({
  id: idSchema,
  fileName: z.string(),
  sampleRateHz: z.number(),
  frames: z.number().int(),
  /** False where nobody has told when it began: its own zero then stands in for that of the run. */
  isPlaceKnown: z.boolean(),
  pieces: z.array(runPieceSchema),
  /** `null` until measured, and where a pass keeps the sound back. */
  course: z
    .object({
      samplesPerStep: z.number().int().min(1),
      levelDb: z.array(z.number().nullable()).max(1000),
      /** How many begin in each step; `null` where they are withheld. */
      counts: z.array(z.number().int().min(0)).max(1000).nullable(),
    })
    .nullable(),
});
export type TimelineRecording = z.infer<typeof timelineRecordingSchema>;

/** The recordings of a run that the person may see, laid on its clock. */
export const timelineSchema = z.object({
  runId: idSchema,
  /** `null` where an open blind pass on a recording of the run forbids every count. */
  counted: countedSchema.nullable(),
  recordings: z.array(timelineRecordingSchema),
  /** Recordings beyond those listed. */
  leftOut: z.number().int().min(0),
});
export type RunTimeline = z.infer<typeof timelineSchema>;
