import { z } from 'zod';

export const traceQuantitySchema = z.enum(['temperature', 'pressure', 'current', 'voltage', 'other']);
export type TraceQuantity = z.infer<typeof traceQuantitySchema>;

/** Which columns of the table hold time and value, and in which units. */
export const traceMappingSchema = z.object({
  timeColumn: z.number().int().min(0).max(999),
  timeUnit: z.enum(['s', 'ms', 'us', 'min', 'iso']),
  valueColumn: z.number().int().min(0).max(999),
  unit: z.string().trim().min(1).max(20),
});
export type TraceMapping = z.infer<typeof traceMappingSchema>;
