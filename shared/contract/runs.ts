import { z } from 'zod';
import { idSchema, instantSchema, revisionSchema } from './ids.ts';
import { pageSchema, pageQuerySchema } from './page.ts';

export const runKindSchema = z.enum(['experiment', 'control', 'sensor-check']);
export type RunKind = z.infer<typeof runKindSchema>;
export const processSchema = z.enum([
  'droplet-freezing',
  'bulk-freezing',
  'directional-solidification',
  'casting',
  'welding',
  'metal-printing',
  'other',
]);
export type Process = z.infer<typeof processSchema>;

const text = (max: number) => z.string().trim().max(max);
const optionalText = (max: number) =>
  text(max)
    .nullable()
    .default(null)
    .transform((value) => value || null);

export const creditSchema = z.object({
  name: text(120).min(1, 'is needed'),
  orcid: z
    .string()
    .regex(/^\d{4}-\d{4}-\d{4}-\d{3}[\dX]$/, 'is an ORCID iD of the form 0000-0000-0000-0000')
    .nullable()
    .default(null),
  role: text(80).default('experiment'),
});
export type Credit = z.infer<typeof creditSchema>;

/** What a person tells about a run. SI where a unit is named; `null` means unknown. */
export const saveRunSchema = z.object({
  labId: idSchema,
  title: text(160).min(3, 'needs at least 3 characters'),
  kind: runKindSchema,
  material: text(120).min(1, 'is needed'),
  composition: optionalText(300),
  process: processSchema,
  container: optionalText(200),
  cooling: optionalText(300),
  coolingRateKPerS: z.number().min(0, 'cannot be negative').max(1e9).nullable().default(null),
  pressurePa: z.number().min(0, 'cannot be negative').max(1e10).nullable().default(null),
  startTemperatureC: z.number().min(-273.15, 'is below absolute zero').max(5000).nullable().default(null),
  supercoolingK: z.number().min(0, 'cannot be negative').max(1000).nullable().default(null),
  startedAt: instantSchema.nullable().default(null),
  specimen: optionalText(120),
  credits: z.array(creditSchema).max(30).default([]),
  notes: optionalText(4000),
});
export type SaveRun = z.infer<typeof saveRunSchema>;

export const runSchema = z.object({
  id: idSchema,
  labId: idSchema,
  labName: z.string(),
  title: z.string(),
  kind: runKindSchema,
  material: z.string(),
  composition: z.string().nullable(),
  process: processSchema,
  container: z.string().nullable(),
  cooling: z.string().nullable(),
  coolingRateKPerS: z.number().nullable(),
  pressurePa: z.number().nullable(),
  startTemperatureC: z.number().nullable(),
  supercoolingK: z.number().nullable(),
  startedAt: instantSchema.nullable(),
  specimen: z.string().nullable(),
  credits: z.array(creditSchema),
  notes: z.string().nullable(),
  createdAt: instantSchema,
  revision: revisionSchema,
  /** Recordings of this run that the asking person may see. */
  recordingCount: z.number().int(),
  editable: z.boolean(),
});
export type Run = z.infer<typeof runSchema>;

export const runSortSchema = z.enum(['newest', 'oldest', 'title']);
export const listRunsQuerySchema = pageQuerySchema.extend({
  q: text(100).optional(),
  labId: idSchema.optional(),
  material: text(120).optional(),
  process: processSchema.optional(),
  kind: runKindSchema.optional(),
  sort: runSortSchema.default('newest'),
});
export type ListRunsQuery = z.infer<typeof listRunsQuerySchema>;
export const runsPageSchema = pageSchema(runSchema);
