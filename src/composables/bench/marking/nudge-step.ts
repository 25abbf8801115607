import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export const NUDGE_UNITS = ['pixel', 'sample', 'millisecond'] as const;
/** By how much a press of a key moves an edge. */
export type NudgeUnit = (typeof NUDGE_UNITS)[number];

export interface NudgeView {
  window: TimeWindow;
  widthPx: number;
  sampleRateHz: number;
}

/** Whole samples, at least one. */
export function nudgeSamples(unit: NudgeUnit, { window, widthPx, sampleRateHz }: NudgeView): number {
  if (unit === 'sample') return 1;
  const samples = unit === 'millisecond' ? sampleRateHz / 1000 : windowSamples(window) / Math.max(1, widthPx);
  return Math.max(1, Math.round(samples));
}

export function nextUnit(unit: NudgeUnit): NudgeUnit {
  return NUDGE_UNITS[(NUDGE_UNITS.indexOf(unit) + 1) % NUDGE_UNITS.length] ?? 'pixel';
}
