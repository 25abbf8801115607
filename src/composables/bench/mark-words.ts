import type { EventClass } from '@shared/contract/schemes.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { timeDecimals } from '@/composables/bench/time-axis.ts';
import { formatSeconds } from '@/composables/useFormat.ts';

/** How marks are named aloud and in the names of undo steps. */
export interface MarkSpeech {
  classes: readonly EventClass[];
  sampleRateHz: number;
}

export function classTitle(classKey: string, classes: readonly EventClass[]): string {
  return classes.find(({ key }) => key === classKey)?.title ?? classKey;
}

export function classGlyph(classKey: string, classes: readonly EventClass[]): string {
  return classes.find(({ key }) => key === classKey)?.glyph ?? '?';
}

export function timeWords(sample: number, sampleRateHz: number): string {
  return formatSeconds(sample / sampleRateHz, Math.min(6, timeDecimals(sampleRateHz)));
}

const MOST_TABLE_DECIMALS = 5;

/** The same without its unit, for tables that have it in their heading. */
export function timeFigure(sample: number, sampleRateHz: number): string {
  const decimals = Math.min(MOST_TABLE_DECIMALS, timeDecimals(sampleRateHz));
  return formatSeconds(sample / sampleRateHz, decimals).replace(/\u00A0s$/, '');
}

/** "crack at 41.324 8 s" */
export function markName(mark: MarkFields, { classes, sampleRateHz }: MarkSpeech): string {
  return `${classTitle(mark.classKey, classes)} at ${timeWords(mark.startSample, sampleRateHz)}`;
}

/** "crack, sure, at 41.324 8 s" */
export function markSentence(mark: MarkFields, { classes, sampleRateHz }: MarkSpeech): string {
  const title = classTitle(mark.classKey, classes);
  return `${title}, ${mark.confidence}, at ${timeWords(mark.startSample, sampleRateHz)}`;
}

/** "crack at 41.324 8 s", or "3 marks" */
export function severalName(marks: readonly MarkFields[], speech: MarkSpeech): string {
  const [first] = marks;
  return first && marks.length === 1 ? markName(first, speech) : `${marks.length} marks`;
}
