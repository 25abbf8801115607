import { z } from 'zod';
import { channelSchema } from './views.ts';

/** Longest rendition that is made at once. */
export const longestListenS = 120;

/** What is read for one rendition at most; 120 s at 192 kHz. */
export const mostListenFrames = 24_000_000;

/** The highest carrier as a share of the sample rate: above it no room is left that could be heard. */
export const highestCarrierShare = 0.45;

const sample = z.coerce.number().int().min(0);

/** Whose span shows the noise that is gated away: the quietest that the machine finds, or one that a person names. */
export const gateSourceSchema = z.enum(['machine', 'span']);
export type GateSource = z.infer<typeof gateSourceSchema>;

/**
 * A stretch to listen to. In this order: noise gated away, shifted down so that `shiftHz` is heard as 0 Hz, `slow` times slower. With
 * none of them as it was, at a rate that every browser plays.
 */
export const listenQuerySchema = z
  .object({
    channel: channelSchema,
    startSample: sample,
    endSample: z.coerce.number().int().min(1),
    slow: z.coerce.number().min(1).max(1000).default(1),
    shiftHz: z.coerce.number().min(1).max(20_000_000).optional(),
    gate: gateSourceSchema.optional(),
    gateStartSample: sample.optional(),
    gateEndSample: sample.optional(),
  })
  .refine((span) => span.endSample > span.startSample, {
    path: ['endSample'],
    message: 'must lie after the start',
  })
  .refine(
    ({ gate, gateStartSample: start, gateEndSample: end }) =>
      gate !== 'span' || (start !== undefined && end !== undefined && end > start),
    { path: ['gateEndSample'], message: 'goes with the start of a span of noise and lies after it' },
  );
export type ListenQuery = z.infer<typeof listenQuerySchema>;

/** The machine's choice of a span that shows the noise; `null` where the recording is silent throughout. */
export const quietSpanSchema = z.object({
  channel: z.number().int(),
  span: z.object({ startSample: z.number().int(), endSample: z.number().int() }).nullable(),
});
export type QuietSpan = z.infer<typeof quietSpanSchema>;
