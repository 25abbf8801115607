import { z } from 'zod';

export const healthSchema = z.object({
  status: z.enum(['ok', 'degraded']),
  database: z.enum(['ok', 'failed']),
  disk: z.enum(['ok', 'low']),
  jobs: z.enum(['ok', 'parked']),
  /** Figures are for administrators. */
  details: z
    .object({
      freeBytes: z.number().int(),
      jobs: z.object({ queued: z.number().int(), running: z.number().int(), parked: z.number().int() }),
    })
    .nullable(),
});
export type Health = z.infer<typeof healthSchema>;
