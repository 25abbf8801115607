import { z } from 'zod';

export const listeningModeSchema = z.enum(['as-recorded', 'slowed', 'shifted']);
export type ListeningMode = z.infer<typeof listeningModeSchema>;

/** Where the noise profile of the gate came from; `off` where nothing was taken away. */
export const gateProfileSchema = z.enum(['off', 'machine', 'span']);
export type GateProfile = z.infer<typeof gateProfileSchema>;

/** How the place of a mark was listened to before the mark was set. */
export const listeningAidsSchema = z.object({
  mode: listeningModeSchema,
  /** How many times slower than life. */
  slow: z.number().min(1).max(1000),
  carrierHz: z.number().min(0).max(20_000_000).nullable(),
  gate: gateProfileSchema,
});
export type ListeningAids = z.infer<typeof listeningAidsSchema>;

/** What the picture showed when the mark was set. */
export const markViewSchema = z.object({
  startSample: z.number().int().min(0).max(Number.MAX_SAFE_INTEGER),
  /** Exclusive. */
  endSample: z.number().int().min(1).max(Number.MAX_SAFE_INTEGER),
  widthPx: z.number().int().min(1).max(100_000),
  areCandidatesShown: z.boolean(),
  /** Every bin relative to its own quiet level. */
  isNormalised: z.boolean(),
});
export type MarkView = z.infer<typeof markViewSchema>;
