import { z } from 'zod';
import { coverageWaySchema } from './passes.ts';

const sampleSchema = z.number().int().min(0).max(Number.MAX_SAFE_INTEGER);

export const coverageSpanSchema = z
  .object({
    way: coverageWaySchema,
    channel: z.number().int().min(0).max(63),
    startSample: sampleSchema,
    /** Exclusive. */
    endSample: sampleSchema,
    /** Seen: samples per pixel. Heard: how many times slower than life. */
    detail: z.number().positive().max(20_000_000),
  })
  .refine((span) => span.endSample > span.startSample, {
    path: ['endSample'],
    message: 'must lie after the start',
  });
export type CoverageSpan = z.infer<typeof coverageSpanSchema>;

/** Sending a batch twice changes nothing. */
export const addCoverageSchema = z.object({ spans: z.array(coverageSpanSchema).min(1).max(500) });
export type AddCoverage = z.infer<typeof addCoverageSchema>;

/** What has been seen and heard so far, joined over zooms and speeds. */
export const coverageSchema = z.object({
  seenShare: z.number(),
  heardShare: z.number(),
  seen: z.array(z.object({ channel: z.number().int(), startSample: sampleSchema, endSample: sampleSchema })),
  heard: z.array(z.object({ channel: z.number().int(), startSample: sampleSchema, endSample: sampleSchema })),
});
export type Coverage = z.infer<typeof coverageSchema>;
