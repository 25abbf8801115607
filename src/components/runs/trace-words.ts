import type { RecalescenceProposal, Trace, TraceQuantity } from '@shared/contract/traces.ts';
import type { TraceDecimal, TraceSeparator, TraceTimeUnit } from '@shared/domain/trace-cells.ts';
import type { ChoiceOption } from '@/components/app/choice-option.ts';
import { formatDuration, formatNumber, formatSeconds } from '@/composables/useFormat.ts';

function toOptions<Value extends string>(words: Readonly<Record<Value, string>>): ChoiceOption<Value>[] {
  return (Object.keys(words) as Value[]).map((value) => ({ value, label: words[value] }));
}

export const quantityWords: Readonly<Record<TraceQuantity, string>> = {
  temperature: 'temperature',
  pressure: 'pressure',
  current: 'current',
  voltage: 'voltage',
  other: 'other',
};
const separatorWords: Readonly<Record<TraceSeparator, string>> = {
  comma: 'comma ( , )',
  semicolon: 'semicolon ( ; )',
  tab: 'tab',
  bar: 'bar ( | )',
  space: 'spaces',
};
const decimalWords: Readonly<Record<TraceDecimal, string>> = { point: 'point (0.5)', comma: 'comma (0,5)' };
const timeUnitWords: Readonly<Record<TraceTimeUnit, string>> = {
  s: 'seconds',
  ms: 'milliseconds',
  us: 'microseconds',
  min: 'minutes',
  iso: 'dates and times (ISO 8601)',
};
export const quantityOptions = toOptions(quantityWords);
export const separatorOptions = toOptions(separatorWords);
export const decimalOptions = toOptions(decimalWords);
export const timeUnitOptions = toOptions(timeUnitWords);

/** "starts 2.5 s before the run's zero", also with the drift of its clock. */
export function placeWords({ runOffsetNs, clockPpm }: { runOffsetNs: number; clockPpm: number }): string {
  const startS = runOffsetNs / 1e9;
  const place =
    startS === 0
      ? "starts at the run's zero"
      : `starts ${formatDuration(Math.abs(startS), 4)} ${startS < 0 ? 'before' : 'after'} the run's zero`;
  if (clockPpm === 0) return place;
  const way = clockPpm > 0 ? 'fast' : 'slow';
  return `${place}, its clock ${formatNumber(Math.abs(clockPpm), { maximumSignificantDigits: 2 })}\u00A0ppm ${way}`;
}

export function rangeWords({ minimum, maximum, unit }: Pick<Trace, 'minimum' | 'maximum' | 'unit'>): string {
  const figure = (value: number) => formatNumber(value, { maximumSignificantDigits: 4 });
  return `${figure(minimum)} to ${figure(maximum)}\u00A0${unit}`;
}

/** "At 9.12 s ± 0.02 s of run time". */
export function onsetWords({ onsetNs, onsetUncertaintyNs }: RecalescenceProposal): string {
  const uncertaintyS = onsetUncertaintyNs / 1e9;
  const decimals = Math.min(6, Math.max(0, Math.ceil(-Math.log10(uncertaintyS)) + 1));
  return `At ${formatSeconds(onsetNs / 1e9, decimals)} \u00B1 ${formatSeconds(uncertaintyS, decimals)} of run time`;
}
