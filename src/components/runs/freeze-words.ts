import type { Counted, TimelineRecording } from '@shared/contract/timeline.ts';
import type { GrowthPhase } from '@shared/contract/phases.ts';
import type { RunSpan } from '@shared/domain/run-time.ts';
import { phasesAtWords, runTimeWords } from '@/composables/runs/phase-words.ts';
import { rateColumns } from '@/composables/runs/strip-columns.ts';
import { traceValueAt } from '@/composables/runs/strip-trace.ts';
import type { StripTrace } from '@/composables/runs/strip-trace.ts';
import { formatCount, formatNumber } from '@/composables/useFormat.ts';

export interface StripFacts {
  span: RunSpan;
  recordings: readonly TimelineRecording[];
  counted: Counted | null;
  traces: readonly StripTrace[];
  phases: readonly GrowthPhase[];
}

/** The rate is told over a hundredth of what the strip shows. */
const RATE_PARTS = 100;

/** "9.412 s, recalescence, 8.2 candidates/s, -3.1 °C": what the strip shows at a time of the run. */
export function stripWordsAt(ns: number, { span, recordings, counted, traces, phases }: StripFacts): string {
  const half = (span.endNs - span.startNs) / RATE_PARTS / 2;
  const [rate] = rateColumns(recordings, { span: { startNs: ns - half, endNs: ns + half }, columns: 1 });
  const temperatures = traces.map((trace) => ({ trace, value: traceValueAt(trace, ns) }));
  return [
    runTimeWords(ns),
    phasesAtWords(phases, ns),
    counted !== null && rate !== null && rate !== undefined
      ? `${formatNumber(rate, { maximumSignificantDigits: 2 })} ${counted}/s`
      : '',
    ...temperatures.map(({ trace, value }) =>
      value === null ? '' : `${formatNumber(value, { maximumFractionDigits: 1 })}\u00A0${trace.unit}`,
    ),
  ]
    .filter(Boolean)
    .join(', ');
}

/** "9.000 s to 12.000 s of the run, recalescence" */
export function windowWords(window: RunSpan, phases: readonly GrowthPhase[]): string {
  const there = phasesAtWords(phases, (window.startNs + window.endNs) / 2);
  const part = `${runTimeWords(window.startNs)} to ${runTimeWords(window.endNs)} of the run`;
  return there ? `${part}, ${there}` : part;
}

/** What the areas and lines are, beside the strip. */
export function stripNames({ counted, traces, recordings }: Omit<StripFacts, 'span' | 'phases'>): string[] {
  const hasRate = recordings.some(({ course }) => course?.counts?.some((count) => count > 0));
  const hasLevel = recordings.some(({ course }) => course !== null);
  const units = [...new Set(traces.map(({ unit }) => unit))];
  return [counted !== null && hasRate ? counted : '', ...units, hasLevel ? 'level' : ''].filter(Boolean);
}

export function leftOutWords(leftOut: number): string {
  return leftOut > 0 ? `${formatCount(leftOut, 'further recording')} not drawn.` : '';
}
