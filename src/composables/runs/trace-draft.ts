import type { CreateTrace, TraceQuantity } from '@shared/contract/traces.ts';
import type {
  TraceColumns,
  TraceDecimal,
  TraceSeparator,
  TraceTimeUnit,
} from '@shared/domain/trace-cells.ts';
import { clockFromMarks } from '@shared/domain/trace-clock.ts';
import type { TraceClock, TraceMark } from '@shared/domain/trace-clock.ts';
import type { TraceGuess } from '@shared/domain/trace-guess.ts';

/** How the place of a trace on the clock of its run is told. */
export type PlaceWay = 'told' | 'marks' | 'clock';

/** One instant on both clocks, as it is typed. */
export interface MarkDraft {
  traceS: number | null;
  recordingId: string;
  soundS: number | null;
}

export interface PlaceDraft {
  way: PlaceWay;
  /** Run time of the first row. */
  startS: number | null;
  clockPpm: number;
  first: MarkDraft;
  second: MarkDraft;
}

export interface TraceDraft {
  name: string;
  quantity: TraceQuantity;
  unit: string;
  separator: TraceSeparator;
  decimal: TraceDecimal;
  timeColumn: string;
  timeUnit: TraceTimeUnit;
  valueColumn: string;
}

/** A recording on the clock of the run. */
export interface PlacedRecording {
  id: string;
  fileName: string;
  spans: { startNs: number; endNs: number }[];
}

const emptyMark = (recordingId: string): MarkDraft => ({ traceS: null, recordingId, soundS: null });

export function placeDraft(clock: TraceClock, recordings: readonly PlacedRecording[]): PlaceDraft {
  const recordingId = recordings[0]?.id ?? '';
  return {
    way: 'told',
    startS: clock.runOffsetNs / 1e9,
    clockPpm: clock.clockPpm,
    first: emptyMark(recordingId),
    second: emptyMark(recordingId),
  };
}

export function draftFromGuess(guess: TraceGuess, fileName: string): TraceDraft {
  const { quantity, unit, separator, decimal, timeUnit } = guess;
  return {
    name: fileName.replace(/\.[^.]+$/, '').replace(/_/g, ' '),
    quantity,
    unit,
    separator,
    decimal,
    timeUnit,
    timeColumn: String(guess.timeColumn),
    valueColumn: String(guess.valueColumn),
  };
}

export function columnsOf(draft: TraceDraft): TraceColumns {
  const { separator, decimal, timeUnit } = draft;
  const columns = { timeColumn: Number(draft.timeColumn), valueColumn: Number(draft.valueColumn) };
  return { separator, decimal, timeUnit, ...columns };
}

export function toCreateTrace(draft: TraceDraft, clock: TraceClock): CreateTrace {
  const { name, quantity, unit } = draft;
  return { name, quantity, mapping: { ...columnsOf(draft), unit }, ...clock };
}

interface Known {
  recordings: readonly PlacedRecording[];
  /** Run time of the first row by the clock reading in the table, where both are known. */
  byClockNs: number | null;
}

/** The clock that was told, or a sentence on what is missing. */
export function clockOfDraft(place: PlaceDraft, { recordings, byClockNs }: Known): TraceClock | string {
  if (place.way === 'clock' && byClockNs !== null) return { runOffsetNs: byClockNs, clockPpm: 0 };
  if (place.way !== 'marks') {
    if (place.startS === null) return 'Say at which run time the first row stands.';
    return { runOffsetNs: Math.round(place.startS * 1e9), clockPpm: place.clockPpm };
  }
  const first = toMark(place.first, recordings);
  if (first === null) return 'Say when the instant is in the trace and in the recording.';
  return clockFromMarks(first, toMark(place.second, recordings));
}

function toMark(
  { traceS, recordingId, soundS }: MarkDraft,
  recordings: readonly PlacedRecording[],
): TraceMark | null {
  const startNs = recordings.find(({ id }) => id === recordingId)?.spans[0]?.startNs;
  if (traceS === null || soundS === null || startNs === undefined) return null;
  return { traceS, runTimeNs: startNs + soundS * 1e9 };
}
