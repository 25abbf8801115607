import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';

export const labSchema = z.object({ id: idSchema, name: z.string(), createdAt: instantSchema });
export type Lab = z.infer<typeof labSchema>;
export const labsSchema = z.object({ items: z.array(labSchema) });
export const saveLabSchema = z.object({
  name: z.string().trim().min(2, 'needs at least 2 characters').max(120),
});
export type SaveLab = z.infer<typeof saveLabSchema>;
