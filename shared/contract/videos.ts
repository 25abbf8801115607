import { z } from 'zod';

/** One instant told on both clocks: a clap, a flash. */
export const syncMarkSchema = z.object({ videoS: z.number().min(0).max(1e7), runTimeNs: z.number().int() });
export type SyncMark = z.infer<typeof syncMarkSchema>;

export const videoContainerSchema = z.enum(['mp4', 'webm']);
export type VideoContainer = z.infer<typeof videoContainerSchema>;
