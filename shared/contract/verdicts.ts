import { z } from 'zod';

/** "No event" is no class but an answer to a candidate: there is nothing at this place that should be marked. */
export const verdictSchema = z.enum(['event', 'no-event', 'undecided']);
export type Verdict = z.infer<typeof verdictSchema>;
