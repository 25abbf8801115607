import { z } from 'zod';

/** A longer span is a stretch of sound: where "the" burst in it begins would say nothing. */
export const longestOnsetSpanSamples = 1_000_000;

export const onsetQuerySchema = z
  .object({
    channel: z.coerce.number().int().min(0).max(63).default(0),
    startSample: z.coerce.number().int().min(0),
    /** Exclusive. */
    endSample: z.coerce.number().int().min(1),
    /** Lower edge of the band of the mark: what lies below is left out. */
    lowHz: z.coerce.number().min(0).max(20_000_000).optional(),
  })
  .refine((span) => span.endSample > span.startSample, {
    path: ['endSample'],
    message: 'must lie after the start',
  });
export type OnsetQuery = z.infer<typeof onsetQuerySchema>;

/** Where the sound of a span begins, picked on the untouched samples; `null` with the reason where nothing stands out. */
export const onsetAnswerSchema = z.object({
  onsetSample: z.number().int().min(0).nullable(),
  /** Standard deviation of the place, at least the rounding to one sample. */
  uncertaintySamples: z.number().min(0).nullable(),
  /** Rise of the level at the onset. */
  stepDb: z.number().nullable(),
  /** A sentence; `null` where an onset was found. */
  reason: z.string().nullable(),
});
export type OnsetAnswer = z.infer<typeof onsetAnswerSchema>;
