import { z } from 'zod';
import { instantSchema } from './ids.ts';

export const confidenceSchema = z.enum(['sure', 'probable', 'unsure']);
export type Confidence = z.infer<typeof confidenceSchema>;

/** A probable cause. `key` is stable for ever, `glyph` is the shape that stands for it beside its name. */
export const eventClassSchema = z.object({
  key: z.string(),
  title: z.string(),
  definition: z.string(),
  confusedWith: z.string(),
  glyph: z.string(),
});
export type EventClass = z.infer<typeof eventClassSchema>;

export const labelSchemeSchema = z.object({
  version: z.number().int().min(1),
  classes: z.array(eventClassSchema),
  createdAt: instantSchema,
});
export type LabelScheme = z.infer<typeof labelSchemeSchema>;
