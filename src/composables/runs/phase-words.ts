import type { GrowthPhase, GrowthPhaseKind, PhaseBasis } from '@shared/contract/phases.ts';
import { formatSeconds } from '@/composables/useFormat.ts';

interface PhaseName {
  title: string;
  /** Where there is no room for the title. */
  short: string;
  /** What mostly follows it, offered next. */
  next: GrowthPhaseKind;
}

export const phaseNames: Readonly<Record<GrowthPhaseKind, PhaseName>> = {
  'supercooled-liquid': { title: 'supercooled liquid', short: 'L', next: 'recalescence' },
  nucleation: { title: 'nucleation', short: 'N', next: 'recalescence' },
  recalescence: { title: 'recalescence', short: 'R', next: 'dendritic-growth' },
  'dendritic-growth': { title: 'dendritic growth', short: 'D', next: 'planar-growth' },
  'cellular-growth': { title: 'cellular growth', short: 'C', next: 'solid-cooling' },
  'planar-growth': { title: 'planar growth', short: 'P', next: 'solid-cooling' },
  'eutectic-growth': { title: 'eutectic growth', short: 'E', next: 'solid-cooling' },
  coarsening: { title: 'coarsening', short: 'Co', next: 'solid-cooling' },
  'solid-cooling': { title: 'solid, cooling', short: 'S', next: 'solid-cooling' },
  'not-visible': { title: 'not visible', short: '?', next: 'not-visible' },
};

export const phaseOptions = (Object.keys(phaseNames) as GrowthPhaseKind[]).map((value) => ({
  value,
  label: phaseNames[value].title,
}));

export const basisWords: Readonly<Record<PhaseBasis, string>> = {
  camera: 'seen by a camera',
  temperature: 'from the temperature',
  inferred: 'inferred from the rest',
};
/** For tables. */
export const basisShort: Readonly<Record<PhaseBasis, string>> = {
  camera: 'camera',
  temperature: 'temperature',
  inferred: 'inferred',
};
export const basisOptions = (Object.keys(basisWords) as PhaseBasis[]).map((value) => ({
  value,
  label: basisWords[value],
}));

/** A time of the run to the millisecond: what a picture or a thermometer can tell is coarser than that. */
export function runTimeWords(ns: number): string {
  return formatSeconds(ns / 1e9, 3);
}

type Told = Pick<GrowthPhase, 'phase' | 'startNs' | 'endNs'>;

/** "dendritic growth, 10.000 s to 18.000 s" */
export function phaseSpanWords({ phase, startNs, endNs }: Told): string {
  return `${phaseNames[phase].title}, ${runTimeWords(startNs)} to ${runTimeWords(endNs)}`;
}

/** The whole ribbon in words. */
export function ribbonWords(phases: readonly Told[]): string {
  if (phases.length === 0) return 'No growth phases';
  return `Growth phases: ${phases.map(phaseSpanWords).join('; ')}`;
}

/** Names of the phases at a time of the run. */
export function phasesAtWords(phases: readonly Told[], ns: number): string {
  const there = phases.filter(({ startNs, endNs }) => ns >= startNs && ns < endNs);
  return there.map(({ phase }) => phaseNames[phase].title).join(' and ');
}
