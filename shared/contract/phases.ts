import { z } from 'zod';
import { idSchema, instantSchema, revisionSchema } from './ids.ts';
import { confidenceSchema } from './schemes.ts';

export const growthPhaseKindSchema = z.enum([
  'supercooled-liquid',
  'nucleation',
  'recalescence',
  'dendritic-growth',
  'cellular-growth',
  'planar-growth',
  'eutectic-growth',
  'coarsening',
  'solid-cooling',
  'not-visible',
]);
export type GrowthPhaseKind = z.infer<typeof growthPhaseKindSchema>;

/** What the phase was told from. */
export const phaseBasisSchema = z.enum(['camera', 'temperature', 'inferred']);
export type PhaseBasis = z.infer<typeof phaseBasisSchema>;

/** On the clock of the run, whose zero may lie after the start of a recording. */
const runTimeNs = z.number().int().min(-1e15, 'is no time of a run').max(1e15, 'is no time of a run');

const phaseFields = {
  phase: growthPhaseKindSchema,
  startNs: runTimeNs,
  /** Exclusive. */
  endNs: runTimeNs,
  basis: phaseBasisSchema,
  confidence: confidenceSchema,
  note: z.string().trim().max(2000),
};
const endsAfterStart = { path: ['endNs'], message: 'must lie after the start' };

export const createPhaseSchema = z
  .object({
    ...phaseFields,
    confidence: confidenceSchema.default('sure'),
    note: phaseFields.note.default(''),
    /** The own open pass in which it is marked; `null` where the lab itself tells it. */
    passId: idSchema.nullable().default(null),
  })
  .refine((phase) => phase.endNs > phase.startNs, endsAfterStart);
export type CreatePhase = z.infer<typeof createPhaseSchema>;

/** PUT with an id made by the client: creates once, answers the same again, replaces under If-Match. */
export const putPhaseSchema = createPhaseSchema.and(z.object({ runId: idSchema }));
export type PutPhase = z.infer<typeof putPhaseSchema>;

export const patchPhaseSchema = z.object(phaseFields).partial();
export type PatchPhase = z.infer<typeof patchPhaseSchema>;

/** Several may overlap. */
export const phaseSchema = z.object({
  id: idSchema,
  runId: idSchema,
  passId: idSchema.nullable(),
  ...phaseFields,
  /** Whether its maker could hear the run when it was marked. */
  isSoundOpen: z.boolean(),
  /** Whether the asking person may change it now. */
  editable: z.boolean(),
  createdAt: instantSchema,
  updatedAt: instantSchema,
  revision: revisionSchema,
});
export type GrowthPhase = z.infer<typeof phaseSchema>;

export const phasesSchema = z.object({
  items: z.array(phaseSchema),
  /** True while an open blind pass on a recording of the run forbids them; then there are no items. */
  isWithheld: z.boolean(),
  /** What the asking person may add: as the lab, or in the own open pass that is named. */
  may: z.object({ addForLab: z.boolean(), addInPassId: idSchema.nullable() }),
});
export type GrowthPhases = z.infer<typeof phasesSchema>;
