import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';
import { pageSchema, pageQuerySchema } from './page.ts';

export const auditRowSchema = z.object({
  id: idSchema,
  at: instantSchema,
  personId: idSchema.nullable(),
  personName: z.string().nullable(),
  /** `<noun>.<verb in the past>`, for example `recording.cleared`. */
  action: z.string(),
  subjectType: z.string(),
  subjectId: z.string(),
  labId: idSchema.nullable(),
  detail: z.record(z.string(), z.unknown()),
});
export const auditPageSchema = pageSchema(auditRowSchema);
export const listAuditQuerySchema = pageQuerySchema.extend({
  action: z.string().max(80).optional(),
  subjectId: z.string().max(80).optional(),
  personId: idSchema.optional(),
});
