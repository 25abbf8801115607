import { z } from 'zod';
import { temperatureUnitOf } from '../domain/temperature-unit.ts';
import { traceDecimals, traceSeparators, traceTimeUnits } from '../domain/trace-cells.ts';
import { mostClockPpm } from '../domain/trace-clock.ts';
import { idSchema, instantSchema, revisionSchema, sha256Schema } from './ids.ts';

export const traceQuantitySchema = z.enum(['temperature', 'pressure', 'current', 'voltage', 'other']);
export type TraceQuantity = z.infer<typeof traceQuantitySchema>;

const column = z.number().int().min(0).max(999);

/** Which columns of the table hold time and value, in which units, and how its numbers are written. */
export const traceMappingSchema = z
  .object({
    separator: z.enum(traceSeparators),
    decimal: z.enum(traceDecimals),
    timeColumn: column,
    timeUnit: z.enum(traceTimeUnits),
    valueColumn: column,
    unit: z.string().trim().min(1, 'is needed').max(20),
  })
  .refine((mapping) => mapping.timeColumn !== mapping.valueColumn, {
    path: ['valueColumn'],
    message: 'is the column of times',
  });
export type TraceMapping = z.infer<typeof traceMappingSchema>;

const name = z.string().trim().min(1, 'is needed').max(120);
const unit = z.string().trim().min(1, 'is needed').max(20);
/** Half a century on both sides of the run's zero. */
const runOffsetNs = z.number().int().min(-Number.MAX_SAFE_INTEGER).max(Number.MAX_SAFE_INTEGER);
const clockPpm = z.number().min(-mostClockPpm).max(mostClockPpm);

const temperatureUnit = { path: ['unit'], message: 'of a temperature is °C, K or °F' };
function hasItsUnit(trace: { quantity?: TraceQuantity | undefined; unit?: string | undefined }): boolean {
  if (trace.quantity !== 'temperature' || trace.unit === undefined) return true;
  return temperatureUnitOf(trace.unit) !== null;
}

/** What is told with a table; it comes as JSON in the part `trace` of the form, before the part `file`. */
export const createTraceSchema = z
  .object({
    name,
    quantity: traceQuantitySchema,
    mapping: traceMappingSchema,
    runOffsetNs: runOffsetNs.default(0),
    clockPpm: clockPpm.default(0),
  })
  .refine(({ quantity, mapping }) => hasItsUnit({ quantity, unit: mapping.unit }), {
    ...temperatureUnit,
    path: ['mapping', 'unit'],
  });
export type CreateTrace = z.infer<typeof createTraceSchema>;

export const patchTraceSchema = z
  .object({ name, quantity: traceQuantitySchema, unit, runOffsetNs, clockPpm })
  .partial()
  .refine(hasItsUnit, temperatureUnit);
export type PatchTrace = z.infer<typeof patchTraceSchema>;

export const traceSchema = z.object({
  id: idSchema,
  runId: idSchema,
  name: z.string(),
  quantity: traceQuantitySchema,
  unit: z.string(),
  fileName: z.string(),
  sha256: sha256Schema,
  sizeBytes: z.number().int(),
  mapping: traceMappingSchema,
  points: z.number().int(),
  /** On its own clock. */
  durationS: z.number(),
  minimum: z.number(),
  maximum: z.number(),
  /** Run time of its first point. */
  runOffsetNs: z.number().int(),
  /** How much faster its clock runs than that of the run. */
  clockPpm: z.number(),
  createdAt: instantSchema,
  revision: revisionSchema,
  editable: z.boolean(),
});
export type Trace = z.infer<typeof traceSchema>;
export const tracesSchema = z.object({ items: z.array(traceSchema) });

/** What was noticed while the table was read goes with the answer only. */
export const createdTraceSchema = traceSchema.extend({ notes: z.array(z.string()) });
export type CreatedTrace = z.infer<typeof createdTraceSchema>;

export const mostTracePoints = 4000;
const queryNs = z.coerce.number().int().min(-Number.MAX_SAFE_INTEGER).max(Number.MAX_SAFE_INTEGER);
export const tracePointsQuerySchema = z.object({
  fromNs: queryNs.optional(),
  toNs: queryNs.optional(),
  points: z.coerce.number().int().min(10).max(mostTracePoints).default(mostTracePoints),
});
export type TracePointsQuery = z.infer<typeof tracePointsQuerySchema>;

/** Points in run time. Where there are more than asked for, least and greatest of each step are kept. */
export const tracePointsSchema = z.object({
  traceId: idSchema,
  /** Points of the trace in the asked time. */
  total: z.number().int(),
  isReduced: z.boolean(),
  runTimesNs: z.array(z.number().int()),
  values: z.array(z.number()),
});
export type TracePointsAnswer = z.infer<typeof tracePointsSchema>;

/** A jump of a cooling temperature back towards the melting point. Temperatures in °C. */
export const recalescenceSchema = z.object({
  onsetNs: z.number().int(),
  onsetUncertaintyNs: z.number().int(),
  /** When nine tenths of the rise were reached. */
  endNs: z.number().int(),
  /** At the onset, as the sensor shows it. */
  nucleationC: z.number(),
  plateauC: z.number(),
  supercoolingK: z.number(),
  /** What the supercooling is counted from. */
  meltingPointC: z.number(),
  meltingPointFrom: z.enum(['water', 'plateau']),
  riseRateKPerS: z.number(),
  /** Share of the water that the released heat allows to freeze in the flash; `null` for other materials. */
  frozenShare: z.number().nullable(),
  /** One sentence for a person. */
  words: z.string(),
});
export type RecalescenceProposal = z.infer<typeof recalescenceSchema>;
export const recalescencesSchema = z.object({
  traceId: idSchema,
  proposals: z.array(recalescenceSchema),
  /** Why there is none, or what the figures do not know, in sentences. */
  remarks: z.array(z.string()),
});
export type Recalescences = z.infer<typeof recalescencesSchema>;
