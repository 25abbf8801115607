import { z } from 'zod';
import { idSchema } from './ids.ts';
import { processingSchema, sharingSchema } from './recordings.ts';
import { releaseStateSchema } from './releases.ts';

/** What the event stream tells; the page asks for the resource itself when it needs more. */
export const activitySchema = z.discriminatedUnion('topic', [
  z.object({
    topic: z.literal('recording'),
    id: idSchema,
    processing: processingSchema,
    sharing: sharingSchema,
    progress: z.number().min(0).max(1),
  }),
  z.object({
    topic: z.literal('release'),
    id: idSchema,
    state: releaseStateSchema,
    progress: z.number().min(0).max(1),
  }),
  z.object({ topic: z.literal('pass'), id: idSchema }),
]);
export type Activity = z.infer<typeof activitySchema>;
