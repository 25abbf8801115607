import { z } from 'zod';

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
