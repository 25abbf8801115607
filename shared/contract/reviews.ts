import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';
import { pageSchema, pageQuerySchema } from './page.ts';
import { guardFindingSchema, sharingSchema } from './recordings.ts';

/** `clear` shares it, `restrict` keeps it in the lab, `refuse` closes it to everybody but the lab. */
export const decisionSchema = z.enum(['clear', 'restrict', 'refuse']);
export type Decision = z.infer<typeof decisionSchema>;

export const heldRecordingSchema = z.object({
  recordingId: idSchema,
  fileName: z.string(),
  runTitle: z.string(),
  labId: idSchema,
  labName: z.string(),
  uploadedByName: z.string().nullable(),
  uploadedByMe: z.boolean(),
  heldAt: instantSchema,
  findings: z.array(guardFindingSchema),
  /** Decisions this person may take; `clear` is missing while personal metadata is in the file. */
  decisions: z.array(decisionSchema),
  /** Why a decision is missing, in a sentence; `null` when none is. */
  limits: z.string().nullable(),
});
export type HeldRecording = z.infer<typeof heldRecordingSchema>;
export const reviewsPageSchema = pageSchema(heldRecordingSchema);
export const listReviewsQuerySchema = pageQuerySchema.extend({ recordingId: idSchema.optional() });

export const decideSchema = z.object({
  decision: decisionSchema,
  reason: z.string().trim().min(10, 'needs a sentence (at least 10 characters)').max(2000),
});
export type Decide = z.infer<typeof decideSchema>;

export const reviewSchema = z.object({
  id: idSchema,
  recordingId: idSchema,
  decision: decisionSchema,
  reason: z.string(),
  reviewerName: z.string(),
  decidedAt: instantSchema,
  sharing: sharingSchema,
});
export type Review = z.infer<typeof reviewSchema>;
export const reviewHistorySchema = z.object({ items: z.array(reviewSchema) });
