import { z } from 'zod';
import { idSchema, instantSchema, revisionSchema } from './ids.ts';
import { burstParametersSchema } from './measurement.ts';
import { confidenceSchema } from './schemes.ts';
import { listeningAidsSchema, markViewSchema } from './mark-circumstances.ts';

export const eventOriginSchema = z.enum(['hand', 'candidate']);
export type EventOrigin = z.infer<typeof eventOriginSchema>;

const sample = z.number().int().min(0).max(Number.MAX_SAFE_INTEGER);
const frequencyHz = z.number().min(0).max(20_000_000).nullable();

/** What a person says about a span; half-open `[startSample, endSample)`. */
const markFields = {
  channel: z.number().int().min(0).max(63).default(0),
  startSample: sample,
  endSample: sample,
  lowHz: frequencyHz.default(null),
  highHz: frequencyHz.default(null),
  classKey: z.string().min(1).max(60),
  confidence: confidenceSchema,
  note: z.string().trim().max(2000).default(''),
  /** Where the person had put the start, before it was moved to an onset that the machine picked. */
  rawStartSample: sample.nullable().default(null),
  /** How far off the start may be: half a pixel of the picture it was set in, or what the picker says of itself. */
  uncertaintySamples: z.number().min(0).max(Number.MAX_SAFE_INTEGER).nullable().default(null),
  aids: listeningAidsSchema.nullable().default(null),
  view: markViewSchema.nullable().default(null),
};
const endsAfterStart = {
  path: ['endSample'],
  message: 'must lie after the start',
};

export const createEventSchema = z
  .object({
    ...markFields,
    passId: idSchema,
    origin: eventOriginSchema.default('hand'),
    candidateId: idSchema.nullable().default(null),
  })
  .refine((mark) => mark.endSample > mark.startSample, endsAfterStart);
export type CreateEvent = z.infer<typeof createEventSchema>;

/** PUT with an id made by the client: creates once, answers the same again, replaces under If-Match. */
export const putEventSchema = createEventSchema.and(z.object({ recordingId: idSchema }));
export type PutEvent = z.infer<typeof putEventSchema>;

export const patchEventSchema = z
  .object({
    channel: markFields.channel.unwrap(),
    startSample: sample,
    endSample: sample,
    lowHz: frequencyHz,
    highHz: frequencyHz,
    classKey: markFields.classKey,
    confidence: confidenceSchema,
    note: z.string().trim().max(2000),
    rawStartSample: sample.nullable(),
    uncertaintySamples: z.number().min(0).max(Number.MAX_SAFE_INTEGER).nullable(),
    aids: listeningAidsSchema.nullable(),
    view: markViewSchema.nullable(),
  })
  .partial();
export type PatchEvent = z.infer<typeof patchEventSchema>;

export const eventSchema = z.object({
  id: idSchema,
  recordingId: idSchema,
  passId: idSchema,
  channel: z.number().int(),
  startSample: z.number().int(),
  endSample: z.number().int(),
  lowHz: z.number().nullable(),
  highHz: z.number().nullable(),
  classKey: z.string(),
  confidence: confidenceSchema,
  note: z.string(),
  origin: eventOriginSchema,
  candidateId: idSchema.nullable(),
  rawStartSample: z.number().int().nullable(),
  uncertaintySamples: z.number().nullable(),
  aids: listeningAidsSchema.nullable(),
  view: markViewSchema.nullable(),
  /** Measured by the server on the untouched samples when the mark was saved. */
  parameters: burstParametersSchema.nullable(),
  revision: revisionSchema,
  createdById: idSchema,
  createdAt: instantSchema,
  updatedAt: instantSchema,
});
export type RecordingEvent = z.infer<typeof eventSchema>;

export const listEventsQuerySchema = z.object({ passId: idSchema.optional() });
export const eventsSchema = z.object({ items: z.array(eventSchema) });
