import { decodeText } from '@shared/lib/byte-text.ts';
import type { TraceColumns } from '@shared/domain/trace-cells.ts';
import { fewerPoints } from '@shared/domain/trace-steps.ts';
import type { TracePoints } from '@shared/domain/trace-steps.ts';
import { LineCutter, maximumTraceBytes, TraceReader, TraceTableError } from '@shared/domain/trace-table.ts';

const headBytes = 64 * 1024;
const plotPoints = 800;

export interface TracePreview {
  rows: number;
  durationS: number;
  firstInstantMs: number | null;
  notes: string[];
  /** Few enough to be drawn. */
  points: TracePoints;
}

/** The first lines of a table, its titles in the encoding that fits. Throws TraceTableError in words. */
export async function readHeadLines(file: Blob): Promise<string[]> {
  if (file.size > maximumTraceBytes) throw new TraceTableError('A table of a trace may have 50 MB at most.');
  const head = new Uint8Array(await file.slice(0, headBytes).arrayBuffer());
  if (head.includes(0))
    throw new TraceTableError('This file is no table in plain text. Save it as CSV in UTF-8.');
  const lines = decodeText(head).split(/\r?\n/);
  return file.size > headBytes ? lines.slice(0, -1) : lines;
}

/** Reads the whole table as the server will. Throws TraceTableError in words, or an AbortError. */
export async function readTracePreview(
  file: Blob,
  columns: TraceColumns,
  signal: AbortSignal,
): Promise<TracePreview> {
  const reader = new TraceReader(columns);
  const cutter = new LineCutter();
  const take = (line: string) => reader.take(line);
  const decoder = new TextDecoder('latin1');
  const stream = file.stream().getReader();
  for (let piece = await stream.read(); !piece.done; piece = await stream.read()) {
    signal.throwIfAborted();
    cutter.push(decoder.decode(piece.value, { stream: true }), take);
  }
  cutter.finish(take);
  const { timesS, values, firstInstantMs, notes } = reader.finish();
  return {
    rows: timesS.length,
    durationS: timesS.at(-1) ?? 0,
    firstInstantMs,
    notes,
    points: fewerPoints({ timesS, values }, plotPoints),
  };
}
